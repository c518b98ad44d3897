import { divide, type Complex } from '../numerics/complex'
import * as polynomial from '../numerics/polynomial'
import type { TransferFunction } from './types'

/**
 * A transfer function with leading zeros removed.
 * @throws RangeError where the denominator is zero or a coefficient is not finite; callers check user input before.
 */
export function transferFunction(numerator: polynomial.Polynomial, denominator: polynomial.Polynomial): TransferFunction {
  if (polynomial.isZero(denominator)) throw new RangeError('the denominator of a transfer function must not be zero')
  if (![...numerator, ...denominator].every(Number.isFinite)) throw new RangeError('the coefficients of a transfer function must be finite')
  return { numerator: polynomial.trim(numerator), denominator: polynomial.trim(denominator) }
}

/** The series connection a b. Common factors are kept: a cancelled pole is still a mode of the loop. */
export function series(a: TransferFunction, b: TransferFunction): TransferFunction {
  return {
    numerator: polynomial.multiply(a.numerator, b.numerator),
    denominator: polynomial.multiply(a.denominator, b.denominator),
  }
}

/** G(s) at a complex s; parts are infinite or NaN at a pole. */
export function evaluateAt(g: TransferFunction, s: Complex): Complex {
  return divide(polynomial.evaluateComplex(g.numerator, s), polynomial.evaluateComplex(g.denominator, s))
}

/** Poles less zeros; negative for an improper function. */
export function relativeDegree(g: TransferFunction): number {
  return polynomial.degree(g.denominator) - polynomial.degree(g.numerator)
}

/** Free integrators: poles at the origin that no zero there takes away. */
export function systemType(g: TransferFunction): number {
  return Math.max(0, polynomial.rootsAtOrigin(g.denominator) - polynomial.rootsAtOrigin(g.numerator))
}
