import * as complex from '../../numerics/complex'
import type { Complex } from '../../numerics/complex'
import { evaluateAccurately } from '../../numerics/compensated'
import * as polynomial from '../../numerics/polynomial'
import { roots } from '../../numerics/roots'
import type { TransferFunction } from '../types'

export interface Meeting {
  point: Complex
  gain: number
}

/** Two meetings closer than this (relative) are one place where the line touches the locus. */
const coincidence = 1e-7
/** The angle (radians) within which a touching point is on the locus although rounding parted its double root into a complex pair. */
const touchTolerance = 1e-12
/**
 * A root of the condition belongs to a place on the line while its imaginary part is below this share: where the line touches the locus, rounding parts
 * the double root by some 1e-8, and further among clustered places. Whether it truly touches is decided by the angle.
 */
const partedByRounding = 1e-5
/** Polishing changes last digits: a step beyond this share of the radius leads to another place. */
const polishing = 1e-6

/**
 * Where the half line s = r direction, r > 0, meets the locus D + K N = 0 with K > 0: positive roots of the real polynomial
 * Im(N conj D) with -D/N > 0. All of them, nearest the origin first; none where the whole line lies on the locus.
 * @param direction of size 1
 */
export function meetRay(open: TransferFunction, direction: Complex): Meeting[] {
  const n = polynomial.alongRay(open.numerator, direction)
  const d = polynomial.alongRay(open.denominator, direction)
  const condition = polynomial.productDifference(n.im, d.re, n.re, d.im)
  if (polynomial.isZero(condition)) return []
  const radii = direction.re === 0 ? rootsThroughSquares(condition) : roots(condition)
  const meetings = radii
    .filter(root => root.re > 0 && root.im >= 0 && Math.abs(root.im) <= partedByRounding * root.re)
    .map(root => ({ radius: polish(open, direction, root.re), exact: root.im === 0 }))
    .filter(({ radius, exact }) => exact || Math.abs(sine(open, complex.scale(direction, radius))) <= touchTolerance)
    .map(({ radius }) => radius)
    .sort((a, b) => a - b)
    .map(radius => complex.scale(direction, radius))
    .flatMap((point) => {
      const gain = positiveGain(open, point)
      return gain === null ? [] : [{ point, gain }]
    })
  return meetings.filter(({ point }, i) => i === 0
    || complex.distance(point, meetings[i - 1]!.point) > coincidence * complex.abs(point))
}

/** On the imaginary axis the condition holds powers of one parity only: half the degree in w^2. */
function rootsThroughSquares(condition: number[]): Complex[] {
  const odd = (condition.length - 1) % 2
  const inSquares = condition.slice(0, condition.length - odd).filter((_, i) => i % 2 === 0)
  return roots(inSquares).map(complex.sqrt)
}

/** K = |D|/|N| where D and N point in opposite directions, else null; null also at an open-loop pole (K = 0) or zero. */
function positiveGain(open: TransferFunction, s: Complex): number | null {
  const n = evaluateAccurately(open.numerator, s)
  const d = evaluateAccurately(open.denominator, s)
  const size = complex.abs(s)
  if (complex.abs(n) <= noise(open.numerator, size) || complex.abs(d) <= noise(open.denominator, size)) return null
  return n.re * d.re + n.im * d.im < 0 ? complex.abs(d) / complex.abs(n) : null
}

function noise(p: number[], size: number): number {
  return 8 * p.length * 2 ** -53 * polynomial.evaluateSize(p, size)
}

/** Sine of the angle between N and D. */
function sine(open: TransferFunction, s: Complex): number {
  const n = evaluateAccurately(open.numerator, s)
  const d = evaluateAccurately(open.denominator, s)
  return (n.im * d.re - n.re * d.im) / (complex.abs(n) * complex.abs(d))
}

/** Newton on Im(N conj D) evaluated at the point itself: the coefficients along the ray carry rounding that the loop's own do not. */
function polish(open: TransferFunction, direction: Complex, start: number): number {
  const slopes = { numerator: polynomial.derivative(open.numerator), denominator: polynomial.derivative(open.denominator) }
  let r = start
  for (let round = 0; round < 3; round++) {
    const s = complex.scale(direction, r)
    const n = evaluateAccurately(open.numerator, s)
    const d = evaluateAccurately(open.denominator, s)
    const nSlope = complex.multiply(direction, polynomial.evaluateComplex(slopes.numerator, s))
    const dSlope = complex.multiply(direction, polynomial.evaluateComplex(slopes.denominator, s))
    const value = n.im * d.re - n.re * d.im
    const slope = nSlope.im * d.re + n.im * dSlope.re - nSlope.re * d.im - n.re * dSlope.im
    const step = value / slope
    if (!(Math.abs(step) <= polishing * r)) break
    r -= step
  }
  return r
}
