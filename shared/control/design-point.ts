import type { Complex } from '../numerics/complex'

/** Damping ratio and natural frequency (rad/s) beside the place itself. */
export type DesignPointFigures = Complex & { dampingRatio: number, naturalFrequency: number }

/**
 * Damping ratio -re/|s| of a root: cosine of the angle between it and the negative real axis; 1 on that axis, 0 on the imaginary axis,
 * negative in the right half plane. At the origin, which has no direction, 0: a root there does not decay.
 */
export function dampingRatioOf(s: Complex): number {
  const size = Math.hypot(s.re, s.im)
  // Adding zero keeps a negative zero from escaping.
  return size === 0 ? 0 : -s.re / size + 0
}

/** The point with its damping ratio and natural frequency |s|. */
export function describePoint({ re, im }: Complex): DesignPointFigures {
  return { re, im, dampingRatio: dampingRatioOf({ re, im }), naturalFrequency: Math.hypot(re, im) }
}

/**
 * s = -zeta wn + j wn sqrt(1 - zeta^2).
 * @param dampingRatio zeta in [-1, 1]
 * @param naturalFrequency wn >= 0, rad/s
 * @throws RangeError outside those ranges
 */
export function pointFromDamping(dampingRatio: number, naturalFrequency: number): Complex {
  if (!(Math.abs(dampingRatio) <= 1)) throw new RangeError('the damping ratio of a design point lies between -1 and 1')
  if (!(naturalFrequency >= 0 && Number.isFinite(naturalFrequency))) throw new RangeError('the natural frequency is a finite number, 0 or greater')
  return {
    re: -dampingRatio * naturalFrequency + 0,
    im: naturalFrequency * Math.sqrt((1 - dampingRatio) * (1 + dampingRatio)),
  }
}

/**
 * Overshoot of the standard second-order system in percent: 100 exp(-pi zeta/sqrt(1 - zeta^2)); 0 from zeta = 1 on.
 * Source: K. Ogata, "Modern Control Engineering", second-order transient response.
 */
export function overshootFromDamping(dampingRatio: number): number {
  if (dampingRatio >= 1) return 0
  return 100 * Math.exp(-Math.PI * dampingRatio / Math.sqrt((1 - dampingRatio) * (1 + dampingRatio)))
}

/**
 * The damping ratio whose standard second-order system overshoots by so many percent: the inverse of `overshootFromDamping`, the ray for a
 * wanted overshoot.
 * @throws RangeError unless 0 <= overshoot <= 100
 */
export function dampingFromOvershoot(overshootPercent: number): number {
  if (!(overshootPercent >= 0 && overshootPercent <= 100)) throw new RangeError('an overshoot that a damping ratio stands for lies between 0 and 100 percent')
  if (overshootPercent === 0) return 1
  const decrement = -Math.log(overshootPercent / 100)
  return decrement / Math.hypot(Math.PI, decrement) + 0
}
