import * as polynomial from '../../numerics/polynomial'
import type { Polynomial } from '../../numerics/polynomial'
import { realRoots, timesPowerOfTwo } from '../../numerics/roots'
import type { TransferFunction } from '../types'

/** p(jw) = even(x) + j w odd(x) with x = w^2. */
export interface AlongAxis { even: number[], odd: number[] }

/** A real polynomial on the imaginary axis, as two real polynomials in w^2. Exact. */
export function alongAxis(p: Polynomial): AlongAxis {
  const n = p.length - 1
  const even: number[] = []
  const odd: number[] = []
  p.forEach((coefficient, i) => {
    const power = n - i
    const signed = power % 4 < 2 ? coefficient : -coefficient
    ;(power % 2 === 0 ? even : odd).push(signed)
  })
  return { even: polynomial.trim(even), odd: polynomial.trim(odd) }
}

/** |p(jw)|^2 as a polynomial in w^2. */
export function squaredSize({ even, odd }: AlongAxis): number[] {
  return polynomial.add(polynomial.multiply(even, even), polynomial.multiplyByPower(polynomial.multiply(odd, odd), 1))
}

/** p conj(q) on the axis as re(x) + j w im(x), x = w^2. */
export function timesConjugate(p: AlongAxis, q: AlongAxis): { re: number[], im: number[] } {
  return {
    re: polynomial.add(polynomial.multiply(p.even, q.even), polynomial.multiplyByPower(polynomial.multiply(p.odd, q.odd), 1)),
    im: polynomial.subtract(polynomial.multiply(p.odd, q.even), polynomial.multiply(p.even, q.odd)),
  }
}

/** Frequencies w > 0 at which a polynomial in w^2 vanishes, rising; none where it vanishes everywhere. */
export function positiveFrequencies(inSquares: Polynomial): number[] {
  if (polynomial.isZero(inSquares)) return []
  return realRoots(inSquares).filter(x => x > 0).map(Math.sqrt)
}

/**
 * g with its frequencies in units of a power of two near the mean of its poles, and both polynomials divided by one factor: their squares
 * then stay within the range of numbers at order 40, and the scaling itself rounds nothing.
 */
export function inUnitFrequency({ numerator, denominator }: TransferFunction): { scaled: TransferFunction, unit: number } {
  const stripped = denominator.slice(0, denominator.length - polynomial.rootsAtOrigin(denominator))
  const span = stripped.length - 1
  const exponent = span === 0 ? 0 : Math.round(Math.log2(Math.abs(stripped[span]! / stripped[0]!)) / span)
  const highest = denominator.length - 1
  const logarithm = (p: number[]) => p.reduce((most, c, i) => c === 0 ? most : Math.max(most, Math.log2(Math.abs(c)) + (p.length - 1 - i) * exponent), -Infinity)
  const shift = Math.ceil(Math.max(logarithm(denominator), logarithm(numerator)))
  const scale = (p: number[]) => p.map((c, i) => timesPowerOfTwo(c, (p.length - 1 - i) * exponent - shift))
  return highest < 0 ? { scaled: { numerator, denominator }, unit: 1 } : { scaled: { numerator: scale(numerator), denominator: scale(denominator) }, unit: 2 ** exponent }
}
