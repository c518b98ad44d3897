import type { Complex } from '../../numerics/complex'
import { eigenvalues } from '../../numerics/eigenvalues'
import { byPlace } from '../../numerics/roots'
import type { HeldPlant } from './held-plant'
import type { SampledController } from './sampled-controller'
import { periodMap } from './period-map'

/** A root this small dies out within one sample: as ln(z)/period it would lie beyond every drawing. */
const deadAtOnce = 1e-3
/** A root this close to the unit circle stands on it as far as rounding lets it be told. */
const onCircle = 1e-12

/**
 * The roots of the sampled loop: eigenvalues z of one period, as s = ln(z)/period, where they can be compared with those of the continuous loop. A negative real z has
 * no conjugate; its s lies at half the sampling rate. Those that die out within a sample are left out.
 */
export function sampledRoots(held: HeldPlant, controller: SampledController, period: number): { poles: Complex[], stable: boolean } {
  const { matrix, size } = periodMap(held, controller)
  const all = eigenvalues(matrix, size)
  return {
    poles: all.filter(({ re, im }) => Math.hypot(re, im) >= deadAtOnce)
      .map(({ re, im }) => ({ re: Math.log(Math.hypot(re, im)) / period, im: Math.atan2(im, re) / period }))
      .sort(byPlace),
    stable: all.every(({ re, im }) => Math.hypot(re, im) < 1 - onCircle),
  }
}
