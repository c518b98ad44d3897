import type { Complex } from './complex'
import { productError } from './compensated'
import { pairConjugates } from './pair-conjugates'
import { isZero, rootsAtOrigin, trim, type Polynomial } from './polynomial'
import { findSimultaneously } from './simultaneous-roots'

/**
 * All roots of a polynomial with real coefficients, each as often as its multiplicity.
 *
 * Conjugate pairs are exact mirror images, real roots have im exactly 0, roots at the origin are exactly 0. The order is by rising real
 * part, within it by rising |im|, the upper root of a pair first; equal input gives equal output. Simple roots are good to a few units
 * in the last place of the given coefficients' exact roots; an m-fold root degrades to a cluster about eps^(2/m) wide, and nothing throws for it.
 *
 * Method: zeros at the origin deflated exactly, the variable scaled by a power of two, starting points from the Newton polygon (D. A. Bini,
 * "Numerical computation of polynomial zeros by means of Aberth's method", 1996), simultaneous iteration (O. Aberth, 1973; L. W. Ehrlich,
 * 1967) finished with compensated evaluation, conjugates paired.
 *
 * @param coefficients descending powers; leading zeros are ignored. A constant has no roots: [].
 * @throws RangeError for the zero polynomial (or no coefficients), where every number is a root, and for coefficients that are not finite.
 */
export function roots(coefficients: Polynomial): Complex[] {
  if (!coefficients.every(Number.isFinite)) throw new RangeError('the coefficients of a polynomial must be finite numbers')
  if (isZero(coefficients)) throw new RangeError('every number is a root of the zero polynomial')
  const trimmed = trim(coefficients)
  const atOrigin = rootsAtOrigin(trimmed)
  const rest = trimmed.slice(0, trimmed.length - atOrigin)
  const found = nonZeroRoots(rest)
  for (let i = 0; i < atOrigin; i++) found.push({ re: 0, im: 0 })
  return found.sort(byPlace)
}

/** Real roots only, rising; a root counts as real where `roots` says so. */
export function realRoots(coefficients: Polynomial): number[] {
  return roots(coefficients).filter(root => root.im === 0).map(root => root.re)
}

/** The order of `roots`: rising real part, then rising |im|, the upper one of a pair first. */
export function byPlace(a: Complex, b: Complex): number {
  return a.re - b.re || Math.abs(a.im) - Math.abs(b.im) || b.im - a.im
}

function nonZeroRoots(p: number[]): Complex[] {
  const n = p.length - 1
  if (n === 0) return []
  if (n === 1) return [{ re: -p[1]! / p[0]!, im: 0 }]
  const { scaled, exponent } = scaleVariable(p)
  const unit = 2 ** exponent
  const found = n === 2 ? quadraticRoots(scaled) : pairConjugates(scaled, findSimultaneously(scaled))
  // Adding zero keeps a negative zero from escaping.
  return found.map(root => ({ re: root.re * unit + 0, im: root.im * unit + 0 }))
}

/** p(2^e z) up to a power of two, with e so that the roots' geometric mean is near 1; exact, and without overflow at degree 40. */
function scaleVariable(p: number[]): { scaled: Float64Array, exponent: number } {
  const n = p.length - 1
  const logarithms = p.map(coefficient => Math.log2(Math.abs(coefficient)))
  const exponent = Math.round((logarithms[n]! - logarithms[0]!) / n)
  let largest = -Infinity
  for (let i = 0; i <= n; i++) largest = Math.max(largest, logarithms[i]! + (n - i) * exponent)
  const shift = Math.ceil(largest)
  const scaled = new Float64Array(n + 1)
  for (let i = 0; i <= n; i++) scaled[i] = timesPowerOfTwo(p[i]!, (n - i) * exponent - shift)
  return { scaled, exponent }
}

/** x 2^k where 2^k alone may be out of range. */
export function timesPowerOfTwo(x: number, k: number): number {
  if (k < -1000) return timesPowerOfTwo(x * 2 ** -1000, k + 1000)
  if (k > 1000) return timesPowerOfTwo(x * 2 ** 1000, k - 1000)
  return x === 0 ? 0 : x * 2 ** k
}

/** Closed form with the discriminant in doubled precision, so that close and double roots come out right (W. Kahan, 2004). */
function quadraticRoots(p: Float64Array): Complex[] {
  const a = p[0]!
  const halfB = -p[1]! / 2
  const c = p[2]!
  const square = halfB * halfB
  const product = a * c
  const discriminant = (square - product) + (productError(halfB, halfB, square) - productError(a, c, product))
  if (discriminant < 0) {
    const re = halfB / a
    const im = Math.sqrt(-discriminant) / Math.abs(a)
    return [{ re, im }, { re, im: -im }]
  }
  const far = halfB + (halfB < 0 ? -1 : 1) * Math.sqrt(discriminant)
  if (far === 0) return [{ re: 0, im: 0 }, { re: 0, im: 0 }]
  return [{ re: far / a, im: 0 }, { re: c / far, im: 0 }]
}
