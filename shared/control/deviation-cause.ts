import { abs, distance, divide, multiply, one, scale, subtract, type Complex } from '../numerics/complex'
import { evaluate, fromRoots, scale as scalePolynomial } from '../numerics/polynomial'
import { worthSaying } from './estimate'
import type { Mode } from './modes'
import { respond } from './response/response'
import { highest, lastOutside, type Trajectory } from './response/trajectory'
import type { Readings } from './types'

/** What an engineer sees first of a step response: overshoot in percent, settling time (2 %) in seconds. */
export interface StepShape {
  overshootPercent: number
  settlingTime: number
}

/** What may part a loop from its pair alone: a zero, a root, or a root with the zero beside it. */
export interface Suspect {
  mode: Mode | null
  /** im >= 0; its conjugate is meant with it. */
  zero: Complex | null
}

/** The suspect that explains most of the difference (or all of them, where no single one does), and the loop without it: then the pair alone. */
export interface Cause {
  suspects: Suspect[]
  without: StepShape
}

/** So many suspects are tried at most, and none with less than this share of the first one's influence: each costs a step response. */
const mostTried = 3
const leastInfluence = 0.3
/** A zero within this share of a root's size stands beside it: either alone would tell nothing, since each takes most of the other away. */
const besideWidth = 0.25
/** An overshoot below this share of the final value is rounding, as for the readings. */
const noOvershoot = 1e-12
const settlingBand = 0.02

/** How far two step responses are apart: points of overshoot and percent of settling time, each by what is worth saying. */
export function deviation(a: StepShape, b: StepShape): number {
  const slower = Math.abs(Math.log(a.settlingTime / b.settlingTime))
  return Math.abs(a.overshootPercent - b.overshootPercent) / worthSaying.points + (Number.isNaN(slower) ? 0 : 100 * slower / worthSaying.percent)
}

/** Of the whole loop, from its readings; settling is to 2 % whatever band the readings have. null without a final value other than 0. */
export function stepShape({ finalValue, overshootPercent, settlingTime }: Readings, step: Trajectory, settlingBandPercent: number): StepShape | null {
  if (overshootPercent === null || settlingTime === null || finalValue === null) return null
  if (settlingBandPercent === 100 * settlingBand) return { overshootPercent, settlingTime }
  return { overshootPercent, settlingTime: lastOutside(step, settlingBand * Math.abs(step.remains[0]!)) }
}

/** The step response of the pair (or real root) alone: no zero, no other root. */
export function shapeOfPair(pair: Mode): StepShape | null {
  return shapeOf(placesOf(pair), [], abs(pair.place))
}

/**
 * Why a loop differs from its pair alone: the zero or root without which, the zero-frequency gain kept, the least of the difference is left, if
 * that is at most half.
 * @param modes all modes of the loop, `pair` among them
 * @param zeros closed-loop zeros, conjugates exact
 */
export function deviationCause(pair: Mode, modes: readonly Mode[], zeros: readonly Complex[], whole: StepShape, alone: StepShape): Cause {
  const size = abs(pair.place)
  const suspects = suspectsOf(pair, modes, zeros)
  const tried = suspects
    .map(suspect => ({ suspect, score: influence(suspect, pair.place) }))
    .sort((a, b) => b.score - a.score)
    .slice(0, mostTried)
    .filter(({ score }, _, [first]) => score >= leastInfluence * first!.score)
  let best: Cause = { suspects, without: alone }
  let least = deviation(whole, alone) / 2
  for (const { suspect } of tried) {
    const poles = modes.flatMap(mode => mode === suspect.mode ? [] : placesOf(mode))
    const without = shapeOf(poles, zeros.filter(zero => suspect.zero === null || !isSame(zero, suspect.zero)), size)
    if (without === null || deviation(without, alone) > least) continue
    least = deviation(without, alone)
    best = { suspects: [suspect], without }
  }
  return best
}

function suspectsOf(pair: Mode, modes: readonly Mode[], zeros: readonly Complex[]): Suspect[] {
  const free = zeros.filter(({ im }, i) => im >= 0 && zeros.findIndex(other => isSame(other, zeros[i]!)) === i)
  const roots = modes.filter(mode => mode !== pair).map((mode): Suspect => {
    const beside = free.findIndex(zero => (zero.im === 0) === (mode.place.im === 0) && distance(zero, mode.place) <= besideWidth * abs(mode.place))
    return { mode, zero: beside < 0 ? null : free.splice(beside, 1)[0]! }
  })
  return [...roots, ...free.map(zero => ({ mode: null, zero }))]
}

/** By how much leaving it out would change the weight of the pair, relative, and the share of the root that goes with it. */
function influence({ mode, zero }: Suspect, pair: Complex): number {
  const factor = (place: Complex) => {
    const first = subtract(one, divide(pair, place))
    return place.im === 0 ? first : multiply(first, subtract(one, divide(pair, { re: place.re, im: -place.im })))
  }
  const change = divide(mode ? factor(mode.place) : one, zero ? factor(zero) : one)
  const score = distance(change, one) + (mode?.share ?? 0)
  // Removing a zero that sits on the pair changes everything.
  return Number.isNaN(score) ? Infinity : score
}

/** Overshoot and settling time with these poles and zeros and the final value 1; null where there is no such response. */
function shapeOf(poles: readonly Complex[], zeros: readonly Complex[], size: number): StepShape | null {
  if (poles.length === 0 || zeros.length > poles.length) return null
  // Time measured by the pair keeps the coefficients near 1.
  const places = poles.map(pole => scale(pole, 1 / size))
  const denominator = fromRoots(places)
  const plain = fromRoots(zeros.map(zero => scale(zero, 1 / size)))
  const numerator = scalePolynomial(plain, evaluate(denominator, 0) / evaluate(plain, 0))
  if (![...numerator, ...denominator].every(Number.isFinite)) return null
  try {
    const step = respond({ numerator, denominator }, places, 1)
    const peak = highest(step, 1, noOvershoot)
    return { overshootPercent: peak === null ? 0 : 100 * peak.value, settlingTime: lastOutside(step, settlingBand) / size }
  }
  catch (error) {
    // Numbers beyond range on the way: then this suspect has no say.
    if (error instanceof RangeError) return null
    throw error
  }
}

function placesOf({ place, multiplicity }: Mode): Complex[] {
  const upper = new Array<Complex>(multiplicity).fill(place)
  return place.im === 0 ? upper : [...upper, ...new Array<Complex>(multiplicity).fill({ re: place.re, im: -place.im })]
}

function isSame(zero: Complex, other: Complex): boolean {
  return zero.re === other.re && Math.abs(zero.im) === Math.abs(other.im)
}
