import { evaluateAccurately } from '../../numerics/compensated'
import { abs, type Complex } from '../../numerics/complex'
import { findRoot } from '../../numerics/find-root'
import * as polynomial from '../../numerics/polynomial'
import { alongAxis, inUnitFrequency, type AlongAxis } from './along-axis'
import type { TransferFunction } from '../types'

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
  const top = alongAxis(denominator)
  const bottom = alongAxis(characteristic)
  // An integrator that a zero at the origin takes away leaves a plain value there.
  const atOrigin = Math.min(polynomial.rootsAtOrigin(denominator), polynomial.rootsAtOrigin(characteristic))
  let best = Math.max(
    ratio(polynomial.coefficientOf(denominator, atOrigin), polynomial.coefficientOf(characteristic, atOrigin)),
    ratio(polynomial.leading(denominator), polynomial.leading(characteristic)),
  )
  const slopeAt = (w: number) => sample(top, bottom, w).slope
  let before: Sample | null = null
  for (const w of frequencies(poles, unit)) {
    const here = sample(top, bottom, w)
    if (here.size > best) best = here.size
    if (before && before.slope > 0 && here.slope < 0) {
      const s = { re: 0, im: findRoot(slopeAt, before.w, w, 1e-10) }
      best = Math.max(best, abs(evaluateAccurately(denominator, s)) / abs(evaluateAccurately(characteristic, s)))
    }
    before = here
  }
  return best < boundless ? best : null
}

interface Sample { w: number, size: number, slope: number }

/** |S| and a number with the sign of d|S|/dw. */
function sample(top: AlongAxis, bottom: AlongAxis, w: number): Sample {
  const x = w * w
  const d = squareAt(top, x)
  const p = squareAt(bottom, x)
  const size = Math.sqrt(d.square / p.square)
  return { w, size: Number.isNaN(size) ? 0 : size, slope: d.slope * p.square - p.slope * d.square }
}

/** |p(jw)|^2 and its derivative in x = w^2. */
function squareAt({ even, odd }: AlongAxis, x: number): { square: number, slope: number } {
  let e = 0
  let eSlope = 0
  for (let i = 0; i < even.length; i++) {
    eSlope = eSlope * x + e
    e = e * x + even[i]!
  }
  let o = 0
  let oSlope = 0
  for (let i = 0; i < odd.length; i++) {
    oSlope = oSlope * x + o
    o = o * x + odd[i]!
  }
  return { square: e * e + x * o * o, slope: 2 * e * eSlope + o * o + 2 * x * o * oSlope }
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
