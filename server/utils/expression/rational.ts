import * as polynomial from '#shared/numerics/polynomial'
import { limits } from '#shared/schemas/limits'

/**
 * A ratio of polynomials in s, kept in factors as they were typed, so that sums find a common denominator without multiplying equal
 * factors and compound fractions clear. Common factors of numerator and denominator that were typed as such are never cancelled: a hidden
 * mode belongs to the loop.
 */
export interface Rational {
  /** Expanded numerator. */
  numerator: number[]
  /** Factors of the denominator, none constant, each with leading coefficient 1. */
  factors: number[][]
}

export class OrderError extends Error {}

export const constant = (value: number): Rational => ({ numerator: [value], factors: [] })
export const laplaceVariable: Rational = { numerator: [1, 0], factors: [] }

export const isConstant = (a: Rational) => a.factors.length === 0 && a.numerator.length === 1
export const isZero = (a: Rational) => polynomial.isZero(a.numerator)

export function negate(a: Rational): Rational {
  return { numerator: polynomial.scale(a.numerator, -1), factors: a.factors }
}

export function add(a: Rational, b: Rational): Rational {
  const { shared, onlyLeft, onlyRight } = compare(a.factors, b.factors)
  const numerator = polynomial.add(times(a.numerator, onlyRight), times(b.numerator, onlyLeft))
  return { numerator, factors: [...shared, ...onlyLeft, ...onlyRight] }
}

export function multiply(a: Rational, b: Rational): Rational {
  return { numerator: times(a.numerator, [b.numerator]), factors: [...a.factors, ...b.factors] }
}

/** a / b; b must not be zero. Denominators that both carry clear, as in a fraction of fractions. */
export function divide(a: Rational, b: Rational): Rational {
  const { onlyLeft, onlyRight } = compare(a.factors, b.factors)
  const leading = b.numerator[0] ?? 1
  const divisor = polynomial.scale(b.numerator, 1 / leading)
  return {
    numerator: polynomial.scale(times(a.numerator, onlyRight), 1 / leading),
    factors: divisor.length > 1 ? [...onlyLeft, divisor] : onlyLeft,
  }
}

/** a to a whole power; a must not be zero when the power is negative. */
export function power(a: Rational, exponent: number): Rational {
  const size = Math.max(a.numerator.length - 1, orderOf(a.factors))
  if (size * Math.abs(exponent) > limits.totalOrder) throw new OrderError()
  let result = constant(1)
  for (let n = 0; n < Math.abs(exponent); n += 1) result = multiply(result, a)
  return exponent < 0 ? divide(constant(1), result) : result
}

export function expand(a: Rational): { numerator: number[], denominator: number[] } {
  return { numerator: a.numerator, denominator: times([1], a.factors) }
}

const orderOf = (factors: number[][]) => factors.reduce((sum, factor) => sum + factor.length - 1, 0)

function times(p: number[], factors: number[][]): number[] {
  if (p.length - 1 + orderOf(factors) > limits.totalOrder) throw new OrderError()
  return factors.reduce<number[]>((sofar, factor) => polynomial.multiply(sofar, factor), p)
}

function compare(left: number[][], right: number[][]) {
  const rest = [...right]
  const shared: number[][] = []
  const onlyLeft: number[][] = []
  for (const factor of left) {
    const index = rest.findIndex(other => other.length === factor.length && other.every((value, i) => value === factor[i]))
    if (index < 0) onlyLeft.push(factor)
    else shared.push(...rest.splice(index, 1))
  }
  return { shared, onlyLeft, onlyRight: rest }
}
