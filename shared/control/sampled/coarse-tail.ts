import type { Complex } from '../../numerics/complex'
import { solveLinear } from '../../numerics/linear'
import { applyMatrix } from '../../numerics/matrix-exponential'
import type { PiecewiseSignal } from '../response/piecewise'
import { nodesPerPiece } from '../response/step-propagator'
import { refuseMoreWork, type Work } from '../response/work'
import type { PeriodMap } from './period-map'

/** A root is gone once it has decayed by this power of e. */
const gone = Math.log(1e9)
/** Share of the signal that what happens between samples may be off by, once it is no longer followed. */
const ripple = 1e-7
const pieceAngle = 1
const longestStride = 2 ** 30
/** Straight pieces from sample to sample before they become twice as long: what swings for longer than that is known by its envelope. */
const straightPieces = 2000
const last = nodesPerPiece - 1

/** What a constant input does by itself: what one period adds to the state, and to the controller output at its start. */
export interface Drive { state: Float64Array, effort: number }

/** Seconds until a root is gone. */
export function lifeOf({ re }: Complex): number {
  return gone / -re
}

/**
 * Seconds for which a root must be followed between the samples too: the plant's corners there are (|s| period)^2/8 of the root's share, and a stride of several
 * periods must not pass over its turns.
 */
export function quickLifeOf(root: Complex, period: number): number {
  const turn = Math.hypot(root.re, root.im) * period
  if (turn * last > pieceAngle) return lifeOf(root)
  return Math.min(lifeOf(root), Math.log(Math.max(1, turn * turn / 8 / ripple)) / -root.re)
}

/**
 * The end of a sampled response, when only roots move that are slow against the period: values at every 2^n-th sample, ever further apart as roots die out. Where a
 * quick root lives on (all but undamped), straight pieces from sample to sample, later ever further apart, so that no loop, however strange, takes long.
 * @param start.since when the roots began to die out: at 0, or when the limit was left
 * @param state at `from`
 */
export function followCoarsely(
  { map, driven, period, poles, since, work }: { map: PeriodMap, driven: Drive, period: number, poles: readonly Complex[], since: number, work: Work },
  signals: { output: PiecewiseSignal, effort: PiecewiseSignal }, state: Float64Array, from: number, until: number,
): void {
  const { size, matrix } = map
  const rest = solveLinear(matrix.map((entry, i) => (i % (size + 1) === 0 ? 1 : 0) - entry), driven.state, size, 1)
  const level = (row: Float64Array) => row.reduce((sum, weight, i) => sum + weight * rest[i]!, 0)
  const [output, effort] = [level(map.output), level(map.effort) + driven.effort]
  let away: Float64Array = state.map((entry, i) => entry - rest[i]!)
  let stride = 1
  let power = matrix
  const lengthen = () => {
    power = squared(power, size)
    stride *= 2
  }
  const at = (row: Float64Array, node: Float64Array) => row.reduce((sum, weight, i) => sum + weight * node[i]!, 0)
  let straight = 0
  for (let t = from; t < until;) {
    if (--work.pieces < 0) refuseMoreWork('loop.samplePeriod')
    const fastest = poles.reduce((most, { re, im }) => (t - since) * -re < gone ? Math.max(most, Math.hypot(re, im)) : most, 0)
    while (2 * stride * last * period * fastest <= pieceAngle && stride < longestStride) lengthen()
    const bent = stride * last * period * fastest <= pieceAngle
    if (!bent && ++straight % straightPieces === 0 && stride < longestStride) lengthen()
    const nodes = [away]
    for (let i = 0; i < (bent ? last : 1); i++) nodes.push(applyMatrix(power, nodes[i]!))
    const length = (bent ? last : 1) * stride * period
    const values = (row: Float64Array, level: number) => bent
      ? Float64Array.from(nodes, node => level + at(row, node))
      : between(level + at(row, away), level + at(row, nodes[1]!))
    signals.output.add(t, length, values(map.output, output))
    signals.effort.add(t, length, values(map.effort, effort))
    away = nodes[nodes.length - 1]!
    t += length
  }
}

/** A straight piece from one value to another. */
function between(a: number, b: number): Float64Array {
  return Float64Array.from({ length: nodesPerPiece }, (_, node) => a + (b - a) * node / last)
}

function squared(a: Float64Array, n: number): Float64Array {
  const result = new Float64Array(n * n)
  for (let i = 0; i < n; i++) {
    for (let k = 0; k < n; k++) {
      const factor = a[i * n + k]!
      if (factor !== 0) for (let j = 0; j < n; j++) result[i * n + j]! += factor * a[k * n + j]!
    }
  }
  return result
}
