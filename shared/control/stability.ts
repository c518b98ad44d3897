import type { Complex } from '../numerics/complex'

/** A root this close to the imaginary axis, against its size, lies on it as far as rounding lets it be told. */
export const onAxis = 1e-13

/** Whether a mode e^(pt) of a root p, in rad/s, dies out: the root lies truly left of the imaginary axis. The one measure of stability here. */
export function diesOut(pole: Complex): boolean {
  return pole.re < -onAxis * Math.hypot(pole.re, pole.im)
}
