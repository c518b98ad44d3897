import * as complex from '../numerics/complex'
import type { Complex } from '../numerics/complex'
import { evaluateAccurately } from '../numerics/compensated'
import * as polynomial from '../numerics/polynomial'
import { realRootsOfQuadratic } from '../numerics/real-roots'
import { NoAnswerError } from './errors'
import type { DelayedFunction, Gains, ThirdCondition, TransferFunction } from './types'
import { valuesAt } from './values-at'

/**
 * A real function of s at the design point: its value there, or at a real point (where a single root would leave a gain free) its value and slope,
 * which together make a double root. Either way two real numbers, linear in the gains.
 */
type Pair = readonly [number, number]

/** Two solutions closer than this (relative) are one. */
const coincidence = 1e-7
/** What rounding leaves of a gain that should be 0, against the share that the others have at the point. */
const nothing = 1e-13

/** kp and kd of kp + kd s/(filter s + 1), so that 1 + G C has a root at s. */
export function placeProportionalDerivative(plant: DelayedFunction, filter: number, s: Complex): Gains {
  const [kp, kd] = solvePair(one, derivativeAt(filter, s), wantedAt(plant, s))
  return { kp, kd: orNothing(kd, kp, complex.abs(s)) }
}

/** kp and ki of kp + ki/s, so that 1 + G C has a root at s. */
export function placeProportionalIntegral(plant: DelayedFunction, s: Complex): Gains {
  refuseIntegrator(s)
  const [kp, ki] = solvePair(one, integralAt(s), wantedAt(plant, s))
  return { kp, ki: orNothing(ki, kp, 1 / complex.abs(s)) }
}

/** kp of the error, measured by the sensor, and kr of the output's rate, so that 1 + G (kp H + kr s) has a root at s. */
export function placeRateFeedback(plant: DelayedFunction, sensor: TransferFunction, s: Complex): Gains {
  const [kp, kr] = solvePair(functionAt(sensor, s), derivativeAt(0, s), wantedAt(plant, s))
  return { kp, kr: orNothing(kr, kp, complex.abs(s)) }
}

/**
 * Every kp, ki, kd of kp + ki/s + kd s/(filter s + 1) that puts a root at s and meets the third condition; all gains positive first, then the
 * larger integral gain.
 *
 * The root at s leaves kp and kd affine in ki. A third real pole p is one more linear equation; the ratio Ti/Td = kp²/(ki kd) makes a quadratic.
 * @throws NoAnswerError where no gains do it
 */
export function placeThreeTerms(plant: DelayedFunction, filter: number, third: ThirdCondition, s: Complex): Gains[] {
  refuseIntegrator(s)
  const derivative = derivativeAt(filter, s)
  const integral = integralAt(s)
  const [p0, d0] = solvePair(one, derivative, wantedAt(plant, s))
  const [p1, d1] = solvePair(one, derivative, [-integral[0], -integral[1]])
  const integralGains = 'pole' in third
    ? throughPole(plant, filter, third.pole, { p0, p1, d0, d1 })
    : atRatio(third.integralToDerivativeRatio, { p0, p1, d0, d1 })
  const solutions = integralGains
    .map(ki => ({ kp: p0 + p1 * ki, ki, kd: d0 + d1 * ki }))
    .filter(gains => Object.values(gains).every(Number.isFinite))
    .sort((a, b) => Number(isPositive(b)) - Number(isPositive(a)) || b.ki - a.ki)
  if (solutions.length === 0) {
    throw new NoAnswerError('pole' in third
      ? 'no gains put a pair at the design point and a third root at the pole asked for'
      : `no real gains reach the design point with Ti/Td = ${third.integralToDerivativeRatio}`, 'designPoint')
  }
  return solutions
}

/** kp = p0 + p1 ki, kd = d0 + d1 ki: all gains that put a root at the design point. */
interface Family { p0: number, p1: number, d0: number, d1: number }

function throughPole(plant: DelayedFunction, filter: number, pole: number, { p0, p1, d0, d1 }: Family): number[] {
  const at = { re: pole, im: 0 }
  const [wanted] = wantedAt(plant, at)
  const [derivative] = derivativeAt(filter, at)
  const slope = p1 + d1 * derivative + 1 / pole
  const size = Math.abs(p1) + Math.abs(d1 * derivative) + Math.abs(1 / pole)
  return Math.abs(slope) <= nothing * size ? [] : [(wanted - p0 - d0 * derivative) / slope]
}

function atRatio(ratio: number, { p0, p1, d0, d1 }: Family): number[] {
  const quadratic = [p1 * p1 - ratio * d1, 2 * p0 * p1 - ratio * d0, p0 * p0]
  const found = realRootsOfQuadratic(quadratic, coincidence).filter(ki => ki !== 0).sort((a, b) => a - b)
  return found.filter((ki, i) => i === 0 || Math.abs(ki - found[i - 1]!) > coincidence * Math.abs(ki))
}

const isPositive = ({ kp, ki, kd }: { kp: number, ki: number, kd: number }) => kp > 0 && ki > 0 && kd > 0

const one: Pair = [1, 0]

/** s/(filter s + 1). */
function derivativeAt(filter: number, s: Complex): Pair {
  if (s.im === 0) {
    const below = filter * s.re + 1
    return [s.re / below, 1 / (below * below)]
  }
  const { re, im } = complex.divide(s, { re: filter * s.re + 1, im: filter * s.im })
  return [re, im]
}

/** 1/s. */
function integralAt(s: Complex): Pair {
  if (s.im === 0) return [1 / s.re, -1 / (s.re * s.re)]
  const { re, im } = complex.reciprocal(s)
  return [re, im]
}

/** -D/N: what the controller must be worth at the point. */
function wantedAt(plant: DelayedFunction, s: Complex): Pair {
  const { numerator, denominator } = valuesAt(plant, s)
  if (s.im !== 0) {
    const { re, im } = complex.divide(denominator, numerator)
    return [-re, -im]
  }
  const numeratorSlope = slopeOf(plant.numerator, s.re) * Math.exp(-s.re * plant.deadTime) - plant.deadTime * numerator.re
  const slope = (denominator.re * numeratorSlope - numerator.re * slopeOf(plant.denominator, s.re)) / (numerator.re * numerator.re)
  return [-denominator.re / numerator.re, slope]
}

function functionAt(g: TransferFunction, s: Complex): Pair {
  const numerator = evaluateAccurately(g.numerator, s)
  const denominator = evaluateAccurately(g.denominator, s)
  if (s.im !== 0) {
    const { re, im } = complex.divide(numerator, denominator)
    return [re, im]
  }
  const slope = (slopeOf(g.numerator, s.re) * denominator.re - numerator.re * slopeOf(g.denominator, s.re)) / (denominator.re * denominator.re)
  return [numerator.re / denominator.re, slope]
}

function slopeOf(p: number[], x: number): number {
  return evaluateAccurately(polynomial.derivative(p), { re: x, im: 0 }).re
}

/** a k1 + b k2 = wanted, by Cramer's rule. */
function solvePair(a: Pair, b: Pair, wanted: Pair): [number, number] {
  const determinant = a[0] * b[1] - a[1] * b[0]
  return [(wanted[0] * b[1] - wanted[1] * b[0]) / determinant, (a[0] * wanted[1] - a[1] * wanted[0]) / determinant]
}

/** Where the other gain does all the work, the sign of a last digit is no advice. */
function orNothing(gain: number, other: number, weight: number): number {
  return Math.abs(gain) * weight <= nothing * Math.abs(other) ? 0 : gain
}

function refuseIntegrator(s: Complex): void {
  if (s.re === 0 && s.im === 0) {
    throw new NoAnswerError('the design point lies on the integrator of the controller, where no gains put a root', 'designPoint')
  }
}
