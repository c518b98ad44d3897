import * as complex from '../../numerics/complex'
import type { Complex } from '../../numerics/complex'
import { cluster, type RepeatedRoot } from '../../numerics/multiple-roots'
import { delayFactor } from '../delay/quasi-polynomial'
import * as polynomial from '../../numerics/polynomial'
import { byPlace, roots } from '../../numerics/roots'
import type { FactoredLoop } from './factored-loop'

/** A place where `meeting` (two or more) roots fall together at a gain. */
export interface Breakaway {
  point: Complex
  gain: number
  meeting: number
}

/** Roots of N'D - ND' closer than this (relative) are one of higher order: three or more branches meet. */
const coincidence = 1e-6
/** K is stationary at the point, so an error of the root hardly shows in it: what is left of its imaginary part is rounding. */
const realGainTolerance = 1e-7

/**
 * Breakaway and break-in points: roots of N'D - ND' (with a dead time T less T N D) where K = -1/L0 is real and positive, real and complex ones, by rising gain.
 * @param loop without common poles and zeros
 */
export function breakaways(loop: FactoredLoop): Breakaway[] {
  const { numerator, denominator, deadTime } = loop
  const rational = polynomial.productDifference(
    polynomial.derivative(numerator), denominator, numerator, polynomial.derivative(denominator))
  const condition = deadTime === 0 ? rational : polynomial.subtract(rational, polynomial.scale(polynomial.multiply(numerator, denominator), deadTime))
  if (polynomial.isZero(condition)) return []
  return cluster(withoutRepeated(roots(condition), [...loop.distinctPoles, ...loop.distinctZeros]), coincidence)
    .map(({ place, multiplicity }) => ({ point: multiplicity === 1 ? polish(loop, place) : place, meeting: multiplicity + 1 }))
    .map(({ point, meeting }) => ({ point, meeting, gain: gainAt(loop, point) }))
    .filter(({ gain }) => gain.re > 0 && Math.abs(gain.im) <= realGainTolerance * gain.re && complex.isFinite(gain))
    .map(({ point, meeting, gain }) => ({ point, gain: gain.re, meeting }))
    .sort((a, b) => a.gain - b.gain || byPlace(a.point, b.point))
}

/** K = -1/L0(s) from the factors. */
export function gainAt(loop: FactoredLoop, s: Complex): Complex {
  let value: Complex = { re: -1 / loop.gain, im: 0 }
  // Taken in turn, so that high orders neither overflow nor underflow on the way.
  for (let i = 0; i < Math.max(loop.poles.length, loop.zeros.length); i++) {
    if (i < loop.poles.length) value = complex.multiply(value, complex.subtract(s, loop.poles[i]!))
    if (i < loop.zeros.length) value = complex.divide(value, complex.subtract(s, loop.zeros[i]!))
  }
  if (loop.deadTime > 0) value = complex.multiply(value, delayFactor(complex.negate(s), loop.deadTime))
  return s.im === 0 ? { re: value.re, im: 0 } : value
}

/** An m-fold pole or zero is an (m - 1)-fold root of the condition, with K = 0 or infinite: the nearest so many are left out. */
function withoutRepeated(found: Complex[], repeated: RepeatedRoot[]): Complex[] {
  const rest = [...found]
  for (const { place, multiplicity } of repeated) {
    if (multiplicity === 1) continue
    rest.sort((a, b) => complex.distance(a, place) - complex.distance(b, place))
    rest.splice(0, multiplicity - 1)
  }
  return symmetric(rest)
}

/** Ties of distance must not part a pair. */
function symmetric(places: Complex[]): Complex[] {
  return places.filter(place => place.im === 0 || places.some(other => other.re === place.re && other.im === -place.im))
}

/** Newton on sum 1/(s - poles) - sum 1/(s - zeros) + dead time, which keeps the accuracy of the factors where coefficients lose it. */
function polish(loop: FactoredLoop, start: Complex): Complex {
  let s = start
  for (let round = 0; round < 4; round++) {
    let value: Complex = { re: loop.deadTime, im: 0 }
    let slope: Complex = complex.zero
    const take = (places: Complex[], sign: number) => places.forEach((place) => {
      const term = complex.reciprocal(complex.subtract(s, place))
      value = complex.add(value, complex.scale(term, sign))
      slope = complex.subtract(slope, complex.scale(complex.multiply(term, term), sign))
    })
    take(loop.poles, 1)
    take(loop.zeros, -1)
    const step = complex.divide(value, slope)
    if (!(complex.abs(step) <= coincidence * complex.abs(s))) return start
    s = { re: s.re - step.re, im: start.im === 0 ? 0 : s.im - step.im }
  }
  return s
}
