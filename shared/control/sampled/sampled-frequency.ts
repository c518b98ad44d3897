import { add, divide, multiply, scale, type Complex } from '../../numerics/complex'
import { Resolvent } from '../../numerics/resolvent'
import type { LoopFunctions } from '../controller'
import { limitAtZero } from '../delay/delayed-frequency'
import { gridAbout, type PointwiseLoop } from '../frequency/along-grid'
import { carry, type HeldPlant } from './held-plant'
import type { SampledController } from './sampled-controller'

/** Turn of the delay between two frequencies, radians. */
const turn = 0.4

/**
 * The sampled loop at z = e^(jw period), from 0 to half the sampling rate: L broken at the controller output, and r to y at the samples.
 */
export function sampledFrequency(held: HeldPlant, controller: SampledController, functions: LoopFunctions, closedLoopPoles: readonly Complex[], period: number): PointwiseLoop {
  const { order, periods } = held
  const still = new Float64Array(order)
  const fromOlder = carry(held.newer, carry(held.older, still, 1), 0)
  const fromNewer = carry(held.newer, carry(held.older, still, 0), 1)
  const plant = new Resolvent(transitionOf(held), order, [fromOlder, fromNewer], [held.output.weights, held.measured.weights])
  const law = new Resolvent(controller.matrix, controller.row.length, [controller.onError, controller.onOutput], [controller.row])

  function at(w: number): { y: Complex, error: Complex, loop: Complex } {
    const z = { re: Math.cos(w * period), im: Math.sin(w * period) }
    // What is held came out `periods` samples ago, the older value one more.
    const newer = { re: Math.cos(w * period * periods), im: -Math.sin(w * period * periods) }
    const older = divide(newer, z)
    const [output, measured] = plant.at(z, [older, newer])
    const y = add(output!, scale(older, held.output.direct))
    const m = add(measured!, scale(older, held.measured.direct))
    const error = add(law.at(z, [{ re: 1, im: 0 }, { re: 0, im: 0 }])[0]!, { re: controller.errorGain, im: 0 })
    const onOutput = add(law.at(z, [{ re: 0, im: 0 }, { re: 1, im: 0 }])[0]!, { re: controller.outputGain, im: 0 })
    const fed = multiply(onOutput, y)
    const back = multiply(error, m)
    return { y, error, loop: { re: back.re - fed.re, im: back.im - fed.im } }
  }

  return {
    loop: w => at(w).loop,
    closed(w) {
      const { y, error, loop } = at(w)
      return divide(multiply(error, y), { re: 1 + loop.re, im: loop.im })
    },
    loopAtZero: limitAtZero(functions.loop),
    closedAtZero: limitAtZero(functions.reference),
    grid: gridOf(held, closedLoopPoles, period),
    mirrored: true,
  }
}

/** e^(A period). */
function transitionOf(held: HeldPlant): Float64Array {
  const n = held.order
  const matrix = new Float64Array(n * n)
  for (let j = 0; j < n; j++) {
    const unit = new Float64Array(n)
    unit[j] = 1
    carry(held.newer, carry(held.older, unit, 0), 0).forEach((entry, i) => { matrix[i * n + j] = entry })
  }
  return matrix
}

function gridOf(held: HeldPlant, closedLoopPoles: readonly Complex[], period: number): number[] {
  const half = Math.PI / period
  // A resonance beyond half the sampling rate shows where it is mirrored to.
  const folded = held.poles.map(({ re, im }) => ({ re, im: Math.abs(Math.atan2(Math.sin(im * period), Math.cos(im * period))) / period }))
  const places = [...folded, ...closedLoopPoles]
  const sizes = places.map(({ re, im }) => Math.hypot(re, im)).filter(size => size > 0)
  const least = Math.min(...sizes, half)
  const delay = (held.periods + 1) * period
  const step = turn / delay
  const turning = Array.from({ length: Math.floor(half / step) }, (_, i) => (i + 1) * step)
  return [...gridAbout(places, least / 100, half), ...turning, half].sort((a, b) => a - b).filter((w, i, all) => i === 0 || w > all[i - 1]! * (1 + 1e-12))
}
