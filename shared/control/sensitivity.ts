import { abs, type Complex } from '../numerics/complex'
import { findRoot } from '../numerics/find-root'
import * as polynomial from '../numerics/polynomial'
import { inUnitFrequency } from './along-axis'
import type { TransferFunction } from './types'

/** Frequencies per factor of e between the roots. */
const density = 8
/** Beyond this the loop stands on the border of stability. */
const boundless = 1e12
/** Places around each pair, in widths of its resonance. */
const widths = [-2, -1, -0.4, 0, 0.4, 1, 2]

/**
 * max over w >= 0 of |S(jw)|, S = 1/(1 + L) = D/(D + N), with w = 0 and w to infinity included; null where it is infinite.
 *
 * Each local maximum is bracketed on frequencies laid around the closed-loop roots (a peak of S is as wide as the root is damped) and refined
 * as a zero of d|S|^2/dw. Source of the figure: K. J. Astrom, R. M. Murray, "Feedback Systems".
 * @param poles roots of D + N
 */
export function sensitivityPeak(loop: TransferFunction, poles: readonly Complex[]): number | null {
  const { scaled: { numerator, denominator }, unit } = inUnitFrequency(loop)
  const characteristic = polynomial.add(denominator, numerator)
  const top = withSlope(denominator)
  const bottom = withSlope(characteristic)
  let best = Math.max(
    ratio(polynomial.coefficientOf(denominator, 0), polynomial.coefficientOf(characteristic, 0)),
    ratio(polynomial.leading(denominator), polynomial.leading(characteristic)),
  )
  let before: Sample | null = null
  for (const w of frequencies(poles, unit)) {
    const here = sample(top, bottom, w)
    best = Math.max(best, here.size)
    if (before && before.slope > 0 && here.slope < 0) best = Math.max(best, sample(top, bottom, findRoot(x => sample(top, bottom, x).slope, before.w, w, 1e-10)).size)
    before = here
  }
  return best < boundless ? best : null
}

interface Sample { w: number, size: number, slope: number }
interface WithSlope { p: number[], slope: number[] }

function withSlope(p: number[]): WithSlope {
  return { p, slope: polynomial.derivative(p) }
}

/** |S| and a number with the sign of d|S|/dw. */
function sample(top: WithSlope, bottom: WithSlope, w: number): Sample {
  const s = { re: 0, im: w }
  const d = polynomial.evaluateComplex(top.p, s)
  const p = polynomial.evaluateComplex(bottom.p, s)
  const dSlope = polynomial.evaluateComplex(top.slope, s)
  const pSlope = polynomial.evaluateComplex(bottom.slope, s)
  // d/dw |q(jw)|^2 = 2 Re(j q' conj q) = -2 Im(q' conj q)
  const turn = (q: Complex, slope: Complex) => slope.re * q.im - slope.im * q.re
  const square = (q: Complex) => q.re * q.re + q.im * q.im
  const size = abs(d) / abs(p)
  return { w, size: Number.isNaN(size) ? 0 : size, slope: turn(d, dSlope) * square(p) - turn(p, pSlope) * square(d) }
}

function frequencies(poles: readonly Complex[], unit: number): number[] {
  const sizes = poles.map(pole => abs(pole) / unit).filter(size => size > 0)
  if (sizes.length === 0) return []
  const from = Math.log(Math.min(...sizes) / 20)
  const to = Math.log(Math.max(...sizes) * 20)
  const count = Math.ceil((to - from) * density)
  const list = Array.from({ length: count + 1 }, (_, i) => Math.exp(from + (to - from) * i / count))
  for (const pole of poles) {
    if (pole.im <= 0) continue
    for (const width of widths) list.push((pole.im + width * Math.abs(pole.re)) / unit)
  }
  return list.filter(w => w > 0).sort((a, b) => a - b)
}

function ratio(a: number, b: number): number {
  return b === 0 ? (a === 0 ? 0 : Infinity) : Math.abs(a / b)
}
