import { arg, abs, negate, type Complex } from '../../numerics/complex'
import * as polynomial from '../../numerics/polynomial'
import { alongAxis, inUnitFrequency, positiveFrequencies, squaredSize, timesConjugate } from './along-axis'
import { toDegrees, wrapAngle } from '../angle'
import { evaluateAt, relativeDegree } from '../transfer-function'
import type { Readings, TransferFunction } from '../types'

export type Margins = Pick<Readings, 'gainMargin' | 'gainMarginDb' | 'phaseMarginDeg' | 'gainCrossover' | 'phaseCrossover' | 'delayMargin'>

/** A polynomial this far below the sum of its terms' sizes is zero as far as can be told. */
const vanishing = 1e-11
/** A crossing whose refinement would move it by more than this share is no crossing. */
const refinement = 1e-3
/** At a phase crossover the refined L is real up to this share: rounding leaves far less, a place where the angle only comes near -180 degrees more. */
const realEnough = 1e-6

/** Radians: margins this close in size are one, and the sign that tells of the loop's stability is taken. A resonance crosses 1 twice, with angles that mirror. */
const equalAngles = 1e-9

/** A place where L(jw) is real and negative: w, and the factor on the gain that carries it to -1. */
interface PhaseCrossing { frequency: number | null, factor: number }

/**
 * Gain, phase and delay margin of a loop transfer L (negative feedback), from polynomials in w^2 and refined on L itself.
 *
 * Gain margin: factors on the overall gain, up and down, at which a closed-loop root lies on the imaginary axis; crossings at s = 0 and, for as
 * many zeros as poles, at infinity count. `gainMarginDb` is the one nearer to 0 dB, `phaseCrossover` its frequency (null at infinity).
 * Phase margin: the smallest |180 deg + arg L| over all gain crossovers, with its sign; `gainCrossover` is that crossover. Of two equally small ones the
 * positive one in a stable loop, the negative one else.
 * Delay margin: the least dead time, seconds, that makes a stable loop unstable; for an unstable loop, the phase margin over its crossover where
 * that is negative, else null.
 * Source: K. J. Astrom, R. M. Murray, "Feedback Systems", section on stability margins.
 * @param stable whether the closed loop is
 */
export function margins(loop: TransferFunction, stable: boolean): Margins {
  const none: Margins = { gainMargin: { upper: null, lower: null }, gainMarginDb: null, phaseMarginDeg: null, gainCrossover: null, phaseCrossover: null, delayMargin: null }
  if (polynomial.isZero(loop.numerator)) return none
  const { scaled, unit } = inUnitFrequency(loop)
  return { ...none, ...gainMargins(scaled, unit), ...phaseMargins(scaled, unit, stable) }
}

function gainMargins(loop: TransferFunction, unit: number): Pick<Margins, 'gainMargin' | 'gainMarginDb' | 'phaseCrossover'> {
  const crossings = phaseCrossings(loop)
  const upward = crossings.filter(crossing => crossing.factor >= 1).sort((a, b) => a.factor - b.factor)[0]
  const downward = crossings.filter(crossing => crossing.factor < 1).sort((a, b) => b.factor - a.factor)[0]
  const nearest = [upward, downward].filter(crossing => crossing !== undefined)
    .sort((a, b) => Math.abs(Math.log(a.factor)) - Math.abs(Math.log(b.factor)))[0]
  return {
    gainMargin: { upper: upward?.factor ?? null, lower: downward?.factor ?? null },
    gainMarginDb: nearest ? 20 * Math.log10(nearest.factor) : null,
    phaseCrossover: nearest && nearest.frequency !== null ? nearest.frequency * unit : null,
  }
}

function phaseCrossings(loop: TransferFunction): PhaseCrossing[] {
  const { numerator, denominator } = loop
  const crossings: PhaseCrossing[] = []
  for (const start of positiveFrequencies(timesConjugate(alongAxis(numerator), alongAxis(denominator)).im)) {
    if (vanishesAt(numerator, start) || vanishesAt(denominator, start)) continue
    // Newton on the angle that L lacks to -180 degrees.
    const frequency = refine(start, w => ({ value: arg(negate(atFrequency(loop, w))), slope: logarithmicSlope(loop, w).re }))
    const value = frequency === null ? null : atFrequency(loop, frequency)
    if (value !== null && value.re < 0 && Math.abs(value.im) < realEnough * -value.re) crossings.push({ frequency, factor: 1 / abs(value) })
  }
  const atZero = -denominator[denominator.length - 1]! / numerator[numerator.length - 1]!
  if (atZero > 0 && Number.isFinite(atZero)) crossings.push({ frequency: 0, factor: atZero })
  const atInfinity = -polynomial.leading(denominator) / polynomial.leading(numerator)
  if (relativeDegree(loop) === 0 && atInfinity > 0) crossings.push({ frequency: null, factor: atInfinity })
  return crossings
}

function phaseMargins(loop: TransferFunction, unit: number, stable: boolean): Pick<Margins, 'phaseMarginDeg' | 'gainCrossover' | 'delayMargin'> {
  const excess = polynomial.subtract(squaredSize(alongAxis(loop.numerator)), squaredSize(alongAxis(loop.denominator)))
  const crossings = positiveFrequencies(excess).flatMap((start) => {
    if (vanishesAt(loop.numerator, start) || vanishesAt(loop.denominator, start)) return []
    // Newton on ln |L|.
    const frequency = refine(start, w => ({ value: Math.log(abs(atFrequency(loop, w))), slope: -logarithmicSlope(loop, w).im }))
    return frequency === null ? [] : [{ frequency, margin: wrapAngle(arg(atFrequency(loop, frequency)) + Math.PI) }]
  })
  const least = Math.min(...crossings.map(({ margin }) => Math.abs(margin)))
  const equallySmall = crossings.filter(({ margin }) => Math.abs(margin) - least <= equalAngles)
  const smallest = equallySmall.find(({ margin }) => (margin > 0) === stable) ?? equallySmall[0] ?? null
  return {
    phaseMarginDeg: smallest && toDegrees(smallest.margin),
    gainCrossover: smallest && smallest.frequency * unit,
    delayMargin: stable ? leastDelay(loop, crossings, unit) : smallest && smallest.margin < 0 ? smallest.margin / (smallest.frequency * unit) : null,
  }
}

/** A delay turns L backwards by w times the delay: each crossover has its whole angle, up to a full turn, to lose. */
function leastDelay(loop: TransferFunction, crossings: readonly { frequency: number, margin: number }[], unit: number): number | null {
  // Where |L| does not fall below 1, any delay lets some high frequency through in phase.
  if (relativeDegree(loop) === 0 && Math.abs(polynomial.leading(loop.numerator) / polynomial.leading(loop.denominator)) >= 1) return 0
  const delays = crossings.map(({ frequency, margin }) => (margin >= 0 ? margin : margin + 2 * Math.PI) / (frequency * unit))
  return delays.length === 0 ? null : Math.min(...delays)
}

function atFrequency(g: TransferFunction, w: number): Complex {
  return evaluateAt(g, { re: 0, im: w })
}

/** L'/L at jw: its real part is d arg L/dw, its imaginary part -d ln|L|/dw. */
function logarithmicSlope({ numerator, denominator }: TransferFunction, w: number): Complex {
  const top = ownSlope(numerator, w)
  const bottom = ownSlope(denominator, w)
  return { re: top.re - bottom.re, im: top.im - bottom.im }
}

function ownSlope(p: number[], w: number): Complex {
  return evaluateAt({ numerator: polynomial.derivative(p), denominator: p }, { re: 0, im: w })
}

/** Two Newton steps from a root of the squared polynomial, which is good to half the digits at worst; null where they lead away. */
function refine(start: number, at: (w: number) => { value: number, slope: number }): number | null {
  let w = start
  for (let i = 0; i < 3; i++) {
    const { value, slope } = at(w)
    const step = value / slope
    if (!(Math.abs(step) <= refinement * w)) return null
    w -= step
    if (Math.abs(step) <= 2 ** -50 * w) break
  }
  return w
}

function vanishesAt(p: number[], w: number): boolean {
  return abs(polynomial.evaluateComplex(p, { re: 0, im: w })) <= vanishing * polynomial.evaluateSize(p, w)
}
