import * as complex from '../numerics/complex'
import type { Complex } from '../numerics/complex'
import { evaluateAccurately } from '../numerics/compensated'
import * as polynomial from '../numerics/polynomial'
import { delayFactor } from './delay/quasi-polynomial'
import { NoAnswerError } from './errors'
import type { DelayedFunction } from './types'

/**
 * N(s), with the dead time's factor, and D(s) to the last digits; D comes out exactly 0 where s is a root within rounding.
 * @throws NoAnswerError where s is a zero, which no finite gain reaches
 */
export function valuesAt(g: DelayedFunction, s: Complex): { numerator: Complex, denominator: Complex } {
  if (vanishes(g.numerator, s)) {
    throw new NoAnswerError('the design point lies on a zero of the loop, which roots reach only for an infinite gain', 'designPoint')
  }
  return {
    numerator: g.deadTime === 0 ? evaluateAccurately(g.numerator, s) : complex.multiply(evaluateAccurately(g.numerator, s), delayFactor(s, g.deadTime)),
    denominator: vanishes(g.denominator, s) ? { re: 0, im: 0 } : evaluateAccurately(g.denominator, s),
  }
}

/** Whether p(s) is 0 as far as the rounding of s itself lets it be told. */
function vanishes(p: number[], s: Complex): boolean {
  const size = Math.hypot(s.re, s.im)
  const slopeSize = polynomial.evaluateSize(polynomial.derivative(p), size) * size
  return complex.abs(evaluateAccurately(p, s)) <= 2 ** -52 * slopeSize
}
