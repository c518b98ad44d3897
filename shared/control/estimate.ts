import type { Complex } from '../numerics/complex'
import { findRoot } from '../numerics/find-root'
import { describePoint, overshootFromDamping } from './design-point'
import type { DesignSolution } from './types'

/** An estimate further than this from the true figure, in points of overshoot or percent of a time, is said to be. */
export const worthSaying = { points: 1, percent: 5 }

/**
 * The second-order rules of thumb at a design point, as if its pair were the whole loop:
 * overshoot 100 exp(-pi zeta/sqrt(1 - zeta^2)) percent, peak time pi/wd, settling time 4/(zeta wn) (2 %), and the 10 to 90 % rise time of
 * the standard second-order system, solved and not fitted (the usual straight-line fits are off by up to 6 %).
 *
 * zeta = 1, or so near to it that the overshoot is no number above 0: no peak. zeta = 0: it never settles. zeta < 0 or s = 0: all null, such a pair has no step figures.
 * Source: K. Ogata, "Modern Control Engineering"; N. S. Nise, "Control Systems Engineering", sections on second-order systems.
 */
export function estimateAt(designPoint: Complex): DesignSolution['estimate'] {
  const { dampingRatio, naturalFrequency } = describePoint(designPoint)
  if (dampingRatio < 0 || naturalFrequency === 0) return { overshootPercent: null, peakTime: null, settlingTime: null, riseTime: null }
  const overshootPercent = overshootFromDamping(dampingRatio)
  return {
    overshootPercent,
    peakTime: overshootPercent > 0 ? Math.PI / designPoint.im : null,
    settlingTime: dampingRatio > 0 ? 4 / (dampingRatio * naturalFrequency) : null,
    riseTime: normalisedRiseTime(dampingRatio) / naturalFrequency,
  }
}

/** wn times the 10 to 90 % rise time of wn^2/(s^2 + 2 zeta wn s + wn^2), 0 <= zeta <= 1. */
export function normalisedRiseTime(dampingRatio: number): number {
  // 90 % is passed before the first peak; at zeta = 1 (1 + t) e^-t is below 0.1 from t = 3.9 on.
  const reaching = (level: number) => findRoot(t => standardStep(dampingRatio, t) - level, 0, latestNinetyPercent(dampingRatio))
  return reaching(0.9) - reaching(0.1)
}

function latestNinetyPercent(dampingRatio: number): number {
  const damped = Math.sqrt((1 - dampingRatio) * (1 + dampingRatio))
  return damped > 0 ? Math.min(4, Math.PI / damped) : 4
}

/**
 * Unit step response of the standard second-order system with wn = 1 at normalised time t = wn times seconds, -1 < zeta <= 1: the curve that the
 * rules of thumb describe.
 */
export function standardStep(dampingRatio: number, t: number): number {
  const damped = Math.sqrt((1 - dampingRatio) * (1 + dampingRatio))
  const angle = damped * t
  // sin(x)/x -> 1 joins the critically damped case on without a seam.
  const ratio = angle < 1e-8 ? t : Math.sin(angle) / damped
  return 1 - Math.exp(-dampingRatio * t) * (Math.cos(angle) + dampingRatio * ratio)
}
