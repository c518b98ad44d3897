import { abs, divide, multiply, type Complex } from '../../numerics/complex'
import * as polynomial from '../../numerics/polynomial'
import { roots } from '../../numerics/roots'
import type { LoopFunctions } from '../controller'
import { gridAbout, type PointwiseLoop } from '../frequency/along-grid'
import { evaluateAt } from '../transfer-function'
import type { TransferFunction } from '../types'
import { delayFactor } from './quasi-polynomial'

/** Turn of the delay between two frequencies, radians. */
const turn = 0.4
const mostTurns = 4000
/** Where L has become smaller than this no margin that matters is left. */
const negligible = 1e-3

/** A loop with dead time on the imaginary axis. */
export function delayedFrequency({ loop, reference, deadTime }: LoopFunctions, closedLoopPoles: readonly Complex[]): PointwiseLoop {
  const withDelay = (w: number) => multiply(evaluateAt(loop, { re: 0, im: w }), delayFactor({ re: 0, im: w }, deadTime))
  return {
    loop: withDelay,
    closed(w) {
      const s = { re: 0, im: w }
      const delay = delayFactor(s, deadTime)
      const below = polynomial.evaluateComplex(loop.denominator, s)
      const back = multiply(polynomial.evaluateComplex(loop.numerator, s), delay)
      return divide(multiply(polynomial.evaluateComplex(reference.numerator, s), delay), { re: below.re + back.re, im: below.im + back.im })
    },
    loopAtZero: limitAtZero(loop),
    closedAtZero: limitAtZero(reference),
    grid: gridOf(loop, closedLoopPoles, deadTime, withDelay),
    mirrored: false,
  }
}

/** g(0); null where infinite. */
export function limitAtZero({ numerator, denominator }: TransferFunction): number | null {
  const strip = Math.min(polynomial.rootsAtOrigin(numerator), polynomial.rootsAtOrigin(denominator))
  const value = polynomial.coefficientOf(numerator, strip) / polynomial.coefficientOf(denominator, strip)
  return Number.isFinite(value) ? value : null
}

function gridOf(loop: TransferFunction, closedLoopPoles: readonly Complex[], deadTime: number, value: (w: number) => Complex): number[] {
  const places = [...roots(loop.denominator), ...(polynomial.isZero(loop.numerator) ? [] : roots(loop.numerator)), ...closedLoopPoles]
  const sizes = places.map(abs).filter(size => size > 0)
  const [least, most] = [Math.min(...sizes, 1 / deadTime), Math.max(...sizes, 1 / deadTime)]
  const coarse = gridAbout(places, least / 100, 10 * most)
  const last = coarse.filter(w => abs(value(w)) > negligible).at(-1) ?? 0
  const end = Math.min(10 * most, last + 4 * Math.PI / deadTime)
  const step = Math.max(turn / deadTime, end / mostTurns)
  const turning = Array.from({ length: Math.floor(end / step) }, (_, i) => (i + 1) * step)
  return [...coarse, ...turning].sort((a, b) => a - b).filter((w, i, all) => w <= end && (i === 0 || w > all[i - 1]! * (1 + 1e-12)))
}
