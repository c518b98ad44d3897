import { abs, arg, negate, type Complex } from '../../numerics/complex'
import { findMaximum } from '../../numerics/find-maximum'
import { findRoot } from '../../numerics/find-root'
import { toDegrees, wrapAngle } from '../angle'
import type { Readings } from '../types'
import type { Margins } from './margins'

/**
 * Figures of the frequency response of a loop that is known point by point only (with dead time, sampled): bracketed on a grid that follows every turn of its
 * phase, refined on the function itself. The definitions are those of `margins`, `sensitivityPeak` and `bandwidth`.
 */
export interface PointwiseLoop {
  /** L at w > 0, rad/s. */
  loop(w: number): Complex
  /** r to y at w > 0. */
  closed(w: number): Complex
  /** Limits of L and of r to y for w to 0; null where infinite. Both are real. */
  loopAtZero: number | null
  closedAtZero: number | null
  /** Rising frequencies > 0 between which the phase of L turns by less than a right angle. */
  grid: number[]
  /** Whether the last frequency of the grid is where the response repeats itself backwards (half the sampling rate): L is real there. */
  mirrored: boolean
}

/** Beyond this the loop stands on the border of stability. */
const boundless = 1e12
const accuracy = 1e-13
/** Angle (radians) to the negative real axis that rounding may leave. */
const realEnough = 1e-6

interface Sample { w: number, value: Complex }

/** All figures of `margins` with the sensitivity peak and the bandwidth. */
export function figuresAlongGrid(pointwise: PointwiseLoop, stable: boolean): Margins & Pick<Readings, 'sensitivityPeak' | 'bandwidth'> {
  const samples = pointwise.grid.map(w => ({ w, value: pointwise.loop(w) }))
  return {
    ...gainMargins(pointwise, samples),
    ...phaseMargins(pointwise, samples, stable),
    sensitivityPeak: sensitivityPeak(pointwise, samples),
    bandwidth: stable ? bandwidth(pointwise) : null,
  }
}

function gainMargins({ loop, loopAtZero, mirrored }: PointwiseLoop, samples: Sample[]): Pick<Margins, 'gainMargin' | 'gainMarginDb' | 'phaseCrossover'> {
  const lack = (value: Complex) => arg(negate(value))
  const crossings = brackets(samples, ({ value }) => lack(value))
    .filter(([a, b]) => Math.abs(lack(a.value) - lack(b.value)) < Math.PI)
    .map(([a, b]) => findRoot(w => lack(loop(w)), a.w, b.w, accuracy))
    // A jump of the angle from one end of its range to the other is no crossing.
    .filter(frequency => Math.abs(lack(loop(frequency))) < realEnough)
    .map(frequency => ({ frequency, factor: 1 / abs(loop(frequency)) }))
  if (loopAtZero !== null && loopAtZero < 0) crossings.push({ frequency: 0, factor: -1 / loopAtZero })
  const end = samples[samples.length - 1]
  if (mirrored && end && end.value.re < 0) crossings.push({ frequency: end.w, factor: -1 / end.value.re })
  const upward = crossings.filter(({ factor }) => factor >= 1).sort((a, b) => a.factor - b.factor)[0]
  const downward = crossings.filter(({ factor }) => factor < 1).sort((a, b) => b.factor - a.factor)[0]
  const nearest = [upward, downward].filter(crossing => crossing !== undefined)
    .sort((a, b) => Math.abs(Math.log(a.factor)) - Math.abs(Math.log(b.factor)))[0]
  return {
    gainMargin: { upper: upward?.factor ?? null, lower: downward?.factor ?? null },
    gainMarginDb: nearest ? 20 * Math.log10(nearest.factor) : null,
    phaseCrossover: nearest?.frequency ?? null,
  }
}

function phaseMargins({ loop }: PointwiseLoop, samples: Sample[], stable: boolean): Pick<Margins, 'phaseMarginDeg' | 'gainCrossover' | 'delayMargin'> {
  const crossings = brackets(samples, ({ value }) => Math.log(abs(value)))
    .map(([a, b]) => findRoot(w => Math.log(abs(loop(w))), a.w, b.w, accuracy))
    .map(frequency => ({ frequency, margin: wrapAngle(arg(loop(frequency)) + Math.PI) }))
  const smallest = [...crossings].sort((a, b) => Math.abs(a.margin) - Math.abs(b.margin))[0] ?? null
  const turns = crossings.map(({ frequency, margin }) => (margin < 0 ? margin + 2 * Math.PI : margin) / frequency)
  return {
    phaseMarginDeg: smallest && toDegrees(smallest.margin),
    gainCrossover: smallest && smallest.frequency,
    delayMargin: stable
      ? turns.length > 0 ? Math.min(...turns) : null
      : smallest && smallest.margin < 0 ? smallest.margin / smallest.frequency : null,
  }
}

function sensitivityPeak({ loop, loopAtZero }: PointwiseLoop, samples: Sample[]): number | null {
  const size = ({ re, im }: Complex) => 1 / Math.hypot(1 + re, im)
  let best = loopAtZero === null ? 0 : 1 / Math.abs(1 + loopAtZero)
  const sizes = samples.map(({ value }) => size(value))
  sizes.forEach((here, i) => {
    best = Math.max(best, here)
    if (i === 0 || i + 1 === sizes.length || here < sizes[i - 1]! || here < sizes[i + 1]!) return
    best = Math.max(best, size(loop(findMaximum(w => size(loop(w)), samples[i - 1]!.w, samples[i + 1]!.w))))
  })
  return best < boundless ? best : null
}

function bandwidth({ closed, closedAtZero, grid }: PointwiseLoop): number | null {
  if (closedAtZero === null || closedAtZero === 0) return null
  const level = Math.abs(closedAtZero) / Math.SQRT2
  const excess = (w: number) => abs(closed(w)) - level
  let before: number | null = null
  for (const w of grid) {
    if (excess(w) < 0) return before === null ? null : findRoot(excess, before, w, accuracy)
    before = w
  }
  return null
}

/** Neighbours between which a figure changes sign. */
function brackets(samples: Sample[], figure: (sample: Sample) => number): [Sample, Sample][] {
  const found: [Sample, Sample][] = []
  let before = NaN
  samples.forEach((sample, i) => {
    const here = figure(sample)
    if (i > 0 && Math.sign(before) * Math.sign(here) === -1) found.push([samples[i - 1]!, sample])
    else if (i > 0 && here === 0) found.push([samples[i - 1]!, sample])
    before = here
  })
  return found
}

/** Places about a resonance, in its widths. */
const widths = [-3, -2, -1, -0.5, -0.2, 0, 0.2, 0.5, 1, 2, 3]
/** Frequencies for a factor of e. */
const density = 12

/** Frequencies spread by ratio, and laid closer about every lightly damped place. */
export function gridAbout(places: readonly Complex[], from: number, to: number): number[] {
  if (!(from < to)) return [from]
  const count = Math.min(2000, Math.ceil(Math.log(to / from) * density))
  const grid = Array.from({ length: count + 1 }, (_, i) => from * (to / from) ** (i / count))
  for (const place of places) {
    if (place.im <= 0) continue
    const width = Math.max(Math.abs(place.re), 1e-9 * place.im)
    for (const share of widths) grid.push(place.im + share * width)
  }
  return grid.filter(w => w >= from && w <= to).sort((a, b) => a - b).filter((w, i, all) => i === 0 || w > all[i - 1]!)
}
