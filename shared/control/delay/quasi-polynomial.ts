import * as complex from '../../numerics/complex'
import type { Complex } from '../../numerics/complex'
import { evaluateAccurately } from '../../numerics/compensated'
import * as polynomial from '../../numerics/polynomial'

/** q(s) = D(s) + N(s) e^(-s deadTime): what the characteristic polynomial becomes with a dead time in the loop. It has infinitely many roots. */
export interface QuasiPolynomial {
  numerator: number[]
  denominator: number[]
  /** Seconds, > 0. */
  deadTime: number
}

/** e^(-s deadTime). */
export function delayFactor(s: Complex, deadTime: number): Complex {
  const size = Math.exp(-s.re * deadTime)
  return { re: size * Math.cos(s.im * deadTime), im: -size * Math.sin(s.im * deadTime) }
}

export interface QuasiValue {
  value: Complex
  slope: Complex
  /** Sum of the sizes of both terms: what value is small against at a root. */
  size: number
}

/** q and dq/ds. */
export function evaluateQuasi({ numerator, denominator, deadTime }: QuasiPolynomial, s: Complex): QuasiValue {
  const delay = delayFactor(s, deadTime)
  const n = complex.multiply(evaluateAccurately(numerator, s), delay)
  const d = evaluateAccurately(denominator, s)
  const nSlope = complex.multiply(polynomial.evaluateComplex(polynomial.derivative(numerator), s), delay)
  const dSlope = polynomial.evaluateComplex(polynomial.derivative(denominator), s)
  return {
    value: complex.add(d, n),
    slope: { re: dSlope.re + nSlope.re - deadTime * n.re, im: dSlope.im + nSlope.im - deadTime * n.im },
    size: complex.abs(d) + complex.abs(n),
  }
}

/**
 * p(s) e^(-s deadTime) with the exponential as its power series to s^degree: exact in all powers up to the degree, which is all that limits at s = 0 feel.
 */
export function timesDelaySeries(p: number[], deadTime: number, degree: number): number[] {
  const series: number[] = [1]
  for (let k = 1; k <= degree; k++) series.push(series[k - 1]! * -deadTime / k)
  const product = polynomial.multiply(p, series.reverse())
  return polynomial.trim(product.slice(Math.max(0, product.length - degree - 1)))
}
