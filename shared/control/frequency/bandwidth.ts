import { abs } from '../../numerics/complex'
import * as polynomial from '../../numerics/polynomial'
import { alongAxis, inUnitFrequency, positiveFrequencies, squaredSize } from './along-axis'
import { evaluateAt } from '../transfer-function'
import type { TransferFunction } from '../types'

/**
 * The first frequency, rad/s, at which |T(jw)| has fallen 3 dB below |T(0)|, that is to |T(0)|/sqrt(2), half the power (-3.0103 dB); null where
 * T(0) is 0 or infinite and where T never falls so far. From the polynomial 2|B|^2 - |T(0)|^2 |A|^2 in w^2, refined on T itself.
 * @param closed T = B/A, reference to output
 */
export function bandwidth(closed: TransferFunction): number | null {
  const { scaled, unit } = inUnitFrequency(closed)
  const atOrigin = Math.min(polynomial.rootsAtOrigin(scaled.numerator), polynomial.rootsAtOrigin(scaled.denominator))
  const t = {
    numerator: scaled.numerator.slice(0, scaled.numerator.length - atOrigin),
    denominator: scaled.denominator.slice(0, scaled.denominator.length - atOrigin),
  }
  const atRest = polynomial.coefficientOf(t.numerator, 0) / polynomial.coefficientOf(t.denominator, 0)
  if (atRest === 0 || !Number.isFinite(atRest)) return null
  const excess = polynomial.combine(2, squaredSize(alongAxis(t.numerator)), -atRest * atRest, squaredSize(alongAxis(t.denominator)))
  const [first] = positiveFrequencies(excess)
  return first === undefined ? null : refine(t, Math.abs(atRest) / Math.SQRT2, first) * unit
}

/** Newton on ln |T|, kept while it shrinks. */
function refine(t: TransferFunction, level: number, start: number): number {
  let w = start
  let last = 1e-3 * start
  for (let i = 0; i < 3; i++) {
    const s = { re: 0, im: w }
    const slope = evaluateAt({ numerator: polynomial.derivative(t.denominator), denominator: t.denominator }, s).im
      - evaluateAt({ numerator: polynomial.derivative(t.numerator), denominator: t.numerator }, s).im
    const step = Math.log(abs(evaluateAt(t, s)) / level) / slope
    if (!(Math.abs(step) <= last)) break
    w -= step
    last = Math.abs(step) / 2
  }
  return w
}
