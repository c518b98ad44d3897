import { remainingPolynomial } from './modal-sum'
import type { TransferFunction } from '../types'

/**
 * What the error r - y of a stable loop tends to for a unit step (integrators 1), a unit ramp (2) or a unit
 * parabola t^2/2 (3); null where it grows without bound.
 * From the power series of the error's transfer function at s = 0 (final value theorem).
 * @param error r to r - y
 */
export function stationaryError(error: TransferFunction, integrators: 1 | 2 | 3): number | null {
  const remains = remainingPolynomial({ ...error, poles: [], integrators })
  return remains.length === 1 ? remains[0]! + 0 : null
}
