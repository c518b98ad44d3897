import { isZero, leading, rootsAtOrigin, type Polynomial } from '../numerics/polynomial'
import type { ClosedLoop } from './closed-loop'
import type { SteadyState } from './types'

/**
 * Type and error constants Kp = L(0), Kv = lim s L, Ka = lim s^2 L as s -> 0, and the error after a parabola. L is the loop with unity feedback whose
 * error r - y is that of this loop, T/(1 - T) with T from r to y: the loop transfer itself where the feedback is unity, and with a sensor or rate
 * feedback the one that tells the error of the true output.
 *
 * Type and constants are figures of L and exist in an unstable loop too; errors do not. Source: K. Ogata, "Modern Control Engineering", and
 * N. S. Nise, "Control Systems Engineering", on static error constants.
 * @param amplitude of the reference, scales the error
 */
export function steadyState({ functions: { reference, error }, stable, stationaryError }: ClosedLoop, amplitude: number): SteadyState {
  if (isZero(error.numerator)) return { type: null, positionConstant: null, velocityConstant: null, accelerationConstant: null, errorParabola: stable ? 0 : null }
  const integrators = isZero(reference.numerator) ? -Infinity : rootsAtOrigin(error.numerator) - rootsAtOrigin(reference.numerator)
  const level = lowest(reference.numerator) / lowest(error.numerator)
  /** lim s^power L. */
  const constant = (power: number) => integrators > power || !Number.isFinite(level) ? null : integrators === power ? level : 0
  const parabola = stable ? stationaryError(3) : null
  return {
    type: Math.max(0, integrators),
    positionConstant: constant(0),
    velocityConstant: constant(1),
    accelerationConstant: constant(2),
    errorParabola: parabola === null ? null : parabola * amplitude + 0,
  }
}

/** The coefficient of the lowest power that is not zero. */
function lowest(p: Polynomial): number {
  return leading([...p].reverse())
}
