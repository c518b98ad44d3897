import * as complex from '../numerics/complex'
import type { Complex } from '../numerics/complex'
import { evaluateAccurately } from '../numerics/compensated'
import * as polynomial from '../numerics/polynomial'
import { realRootsOfQuadratic } from '../numerics/real-roots'
import { toDegrees, wrapAngle } from './angle'
import { NoAnswerError } from './errors'
import type { DelayedFunction, Gains } from './types'
import { valuesAt } from './values-at'

/** Two zeros closer than this (relative) are one. */
const coincidence = 1e-7

/**
 * Every lead k (s + z)/(s + ratio z) with z > 0, k > 0 that puts a root at s; the larger zero-frequency gain k/ratio first.
 *
 * G(s)(s + z)/(s + ratio z) must be real and negative. With h = N conj(D), which has the angle of G, "real" reads
 * ratio Im(h) z^2 + Im(h (ratio s + conj s)) z + Im(h) |s|^2 = 0; at a real point the condition is a double root, the limit of the same quadratic.
 * @param ratio pole over zero, > 1
 * @throws NoAnswerError where no z > 0 does it, saying which phase is asked for and how much the ratio can give
 */
export function placeLead(plant: DelayedFunction, ratio: number, s: Complex): Gains[] {
  const { numerator, denominator } = valuesAt(plant, s)
  if (complex.abs(denominator) === 0) {
    throw new NoAnswerError('the design point lies on a pole of the plant: a root stays there only without any gain, so no lead is determined', 'designPoint')
  }
  const size = complex.abs(denominator)
  const h = complex.multiply(complex.scale(numerator, 1 / size), complex.conjugate(complex.scale(denominator, 1 / size)))
  const zeros = realRootsOfQuadratic(s.im === 0 ? doubleRootCondition(plant, ratio, s.re) : angleCondition(h, ratio, s), coincidence)
  const solutions = zeros
    .filter(z => z > 0)
    .map(z => ({ z, factor: complex.divide({ re: s.re + z, im: s.im }, { re: s.re + ratio * z, im: s.im }) }))
    .filter(({ factor }) => complex.multiply(h, factor).re < 0)
    .map(({ z, factor }) => ({ k: complex.abs(denominator) / complex.abs(numerator) / complex.abs(factor), zero: -z, pole: -ratio * z }))
    .filter(gains => Number.isFinite(gains.k) && gains.k > 0)
    .sort((a, b) => b.k - a.k)
  const distinct = solutions.filter((gains, i) => i === 0 || Math.abs(gains.zero - solutions[i - 1]!.zero) > coincidence * Math.abs(gains.zero))
  if (distinct.length === 0) throw new NoAnswerError(whyNone(h, ratio, s), 'designPoint')
  return distinct
}

function angleCondition(h: Complex, ratio: number, s: Complex): number[] {
  const middle = complex.multiply(h, { re: (ratio + 1) * s.re, im: (ratio - 1) * s.im }).im
  return [ratio * h.im, middle, h.im * (s.re * s.re + s.im * s.im)]
}

/** d/ds [G (s + z)/(s + ratio z)] = 0 at a real place, as a quadratic in z. */
function doubleRootCondition(plant: DelayedFunction, ratio: number, x: number): number[] {
  const at = (p: number[]) => evaluateAccurately(p, { re: x, im: 0 }).re
  const n = at(plant.numerator)
  const d = at(plant.denominator)
  const slope = at(polynomial.derivative(plant.numerator)) * d - n * at(polynomial.derivative(plant.denominator)) - plant.deadTime * n * d
  return [ratio * slope, (ratio + 1) * x * slope + (ratio - 1) * n * d, slope * x * x]
}

function whyNone(h: Complex, ratio: number, s: Complex): string {
  const needed = toDegrees(wrapAngle(Math.PI - complex.arg(h)))
  if (s.im === 0) return 'no lead of this ratio makes a double root at this real point'
  if (needed <= 0) return `the design point asks for ${(-needed).toFixed(1)} degrees of phase lag; a lead only adds phase`
  const best = complex.abs(s) / Math.sqrt(ratio)
  const most = toDegrees(complex.arg({ re: s.re + best, im: s.im }) - complex.arg({ re: s.re + ratio * best, im: s.im }))
  return `the design point asks for ${needed.toFixed(1)} degrees of phase lead; a lead of ratio ${ratio} gives at most ${most.toFixed(1)} there`
}
