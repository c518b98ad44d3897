import * as polynomial from './polynomial'
import { roots } from './roots'

/**
 * The real roots of a quadratic; none for a zero polynomial or coefficients beyond range.
 * @param coincidence two roots closer than this (relative) are one: where they fall together, rounding may part them into a complex pair
 */
export function realRootsOfQuadratic(quadratic: number[], coincidence: number): number[] {
  if (polynomial.isZero(quadratic) || !quadratic.every(Number.isFinite)) return []
  return roots(quadratic).filter(({ re, im }) => im >= 0 && im <= coincidence * Math.abs(re)).map(({ re }) => re)
}
