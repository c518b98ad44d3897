import type { Complex } from '../../numerics/complex'
import { eigenvalues } from '../../numerics/eigenvalues'
import { byPlace } from '../../numerics/roots'
import type { HeldPlant } from './held-plant'
import type { SampledController } from './sampled-controller'
import { freePeriod, restingState, type SampledState } from './sampled-step'

/** A root this small dies out within one sample: as ln(z)/period it would lie beyond every drawing. */
const deadAtOnce = 1e-3
/** A root this close to the unit circle stands on it as far as rounding lets it be told. */
const onCircle = 1e-12

/**
 * The roots of the sampled loop: eigenvalues z of one period, as s = ln(z)/period, where they can be compared with those of the continuous loop. A negative real z has
 * no conjugate; its s lies at half the sampling rate. Those that die out within a sample are left out.
 */
export function sampledRoots(held: HeldPlant, controller: SampledController, period: number): { poles: Complex[], stable: boolean } {
  const zero = restingState(held, controller)
  const sizes = [zero.plant.length, zero.controller.length, zero.sent.length]
  const n = sizes.reduce((sum, size) => sum + size, 0)
  const matrix = new Float64Array(n * n)
  for (let j = 0; j < n; j++) {
    const state = restingState(held, controller)
    entryOf(state, j)
    flat(freePeriod(held, controller, state)).forEach((entry, i) => { matrix[i * n + j] = entry })
  }
  const all = eigenvalues(matrix, n)
  return {
    poles: all.filter(({ re, im }) => Math.hypot(re, im) >= deadAtOnce)
      .map(({ re, im }) => ({ re: Math.log(Math.hypot(re, im)) / period, im: Math.atan2(im, re) / period }))
      .sort(byPlace),
    stable: all.every(({ re, im }) => Math.hypot(re, im) < 1 - onCircle),
  }
}

function entryOf(state: SampledState, j: number): void {
  const { plant, controller, sent } = state
  if (j < plant.length) plant[j] = 1
  else if (j < plant.length + controller.length) controller[j - plant.length] = 1
  else sent[j - plant.length - controller.length] = 1
}

function flat({ plant, controller, sent }: SampledState): number[] {
  return [...plant, ...controller, ...sent]
}
