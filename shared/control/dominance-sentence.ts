import type { Complex } from '../numerics/complex'
import type { Cause, StepShape, Suspect } from './deviation-cause'
import { worthSaying } from './estimate'
import type { Mode } from './modes'

/**
 * Plain sentences on what parts a loop from the second-order estimate. Places in rad/s with three digits, a minus sign as it is typed.
 */

export function unstableSentence(growing: Mode): string {
  return `The ${nameOf(growing)} does not die out, so the second-order estimate says nothing about this loop.`
}

export function noFinalValueSentence(): string {
  return 'The final value is 0, so overshoot and settling time of the second-order estimate have no meaning here.'
}

/** No root lies at the design point. */
export function offLocusSentence(pair: Mode, shape: StepShape, asked: StepShape | null): string {
  const difference = asked === null ? '' : `, and ${againstEstimate(shape, asked)}`
  return `No root lies at the design point: the ${nameOf(pair)} is the nearest one${difference}.`
}

export function agreeingSentence(pair: Mode): string {
  const { points, percent } = worthSaying
  return `${carriesClause(pair)}; estimate and loop agree within ${points} point of overshoot and ${percent} % of settling time.`
}

/** The loop does what its pair does, which the rule of thumb 4/(zeta wn) catches only roughly. */
export function roughRuleSentence(pair: Mode, shape: StepShape, asked: StepShape): string {
  return `${carriesClause(pair)}; ${pair.multiplicity === 1 ? 'at its damping ' : ''}${againstEstimate(shape, asked)}.`
}

export function differingSentence(pair: Mode, shape: StepShape, asked: StepShape, { suspects, without }: Cause): string {
  const said = effects(shape, without, asked, suspects.length > 1 || isPairOfZeros(suspects[0]!))
  const inAll = restOfOvershoot(without, asked) > worthSaying.points ? `; in all ${againstEstimate(shape, asked)}` : ''
  const [first, second] = suspects
  const subject = second ? severalOf(suspects) : suspectName(first!)
  const clause = !second && first?.mode && isSlower(first.mode, pair)
    ? [`The design ${pair.place.im > 0 ? 'pair' : 'root'} is not the slowest: the ${subject} ${carries(first.mode)}`, ...said]
    : [`The ${subject} ${said[0]}`, ...said.slice(1)]
  return `${enumerate(clause)}${inAll}.`
}

/** A part of the loop that is no root or zero (its dead time, its sampling, its limit) makes the difference. */
export function partSentence(part: string, shape: StepShape, without: StepShape, asked: StepShape): string {
  const rest = restOfOvershoot(without, asked) > worthSaying.points ? `; in all ${againstEstimate(shape, asked)}` : ''
  return `The ${part} ${enumerate(effects(shape, without, asked, false))}${rest}.`
}

export function shareSentence(pair: Mode): string {
  return `${carriesClause(pair)}.`
}

/** A slower root with more of the response than the pair. */
function isSlower(mode: Mode, pair: Mode): boolean {
  return mode.place.re > pair.place.re && (mode.share ?? 0) > (pair.share ?? 0)
}

function suspectName({ mode, zero }: Suspect): string {
  if (mode === null) return zeroName(zero!)
  return zero === null ? nameOf(mode) : `${nameOf(mode)} with the ${zeroName(zero)} beside it`
}

/** Two are named; of more it is told what they are. */
function severalOf(suspects: readonly Suspect[]): string {
  if (suspects.length === 2) return `${suspectName(suspects[0]!)} and the ${suspectName(suspects[1]!)} together`
  const kinds = [...(suspects.some(({ mode }) => mode) ? ['other roots'] : []), ...(suspects.some(({ zero }) => zero) ? ['zeros'] : [])]
  return `${kinds.join(' and ')} together`
}

function isPairOfZeros({ mode, zero }: Suspect): boolean {
  return mode === null && zero!.im > 0
}

/** What is different with the suspects: points of overshoot, percent of settling time; the larger of both in any case. */
function effects(shape: StepShape, without: StepShape, asked: StepShape, plural: boolean): string[] {
  const points = shape.overshootPercent - without.overshootPercent
  const percent = 100 * (shape.settlingTime / without.settlingTime - 1)
  const s = plural ? '' : 's'
  const said: string[] = []
  const pointsFirst = !(Math.abs(percent) / worthSaying.percent > Math.abs(points) / worthSaying.points)
  if (Math.abs(points) > worthSaying.points || pointsFirst) {
    const whereto = points > worthSaying.points && restOfOvershoot(without, asked) <= worthSaying.points ? ' to the second-order estimate' : ''
    said.push(points < 0 ? `take${s} ${pointsOf(points)} off the overshoot` : `add${s} ${pointsOf(points)} of overshoot${whereto}`)
  }
  if (Number.isFinite(percent) && (Math.abs(percent) > worthSaying.percent || !pointsFirst)) {
    said.push(percent > 100 ? `make${s} settling ${(1 + percent / 100).toFixed(1)} times as long` : `make${s} settling ${percentOf(percent)} ${percent > 0 ? 'longer' : 'shorter'}`)
  }
  return said
}

/** What of the overshoot beyond the estimate the suspects leave unexplained, in points. */
function restOfOvershoot(without: StepShape, asked: StepShape): number {
  return Math.abs(without.overshootPercent - asked.overshootPercent)
}

function enumerate(clauses: readonly string[]): string {
  return clauses.length < 3 ? clauses.join(' and ') : `${clauses.slice(0, -1).join(', ')} and ${clauses.at(-1)}`
}

/** How the loop stands to the estimate, where that is worth saying; the larger of both in any case. */
function againstEstimate(shape: StepShape, asked: StepShape): string {
  const points = shape.overshootPercent - asked.overshootPercent
  const percent = 100 * (shape.settlingTime / asked.settlingTime - 1)
  if (Math.abs(points) > worthSaying.points) return `the overshoot is ${pointsOf(points)} ${points > 0 ? 'above' : 'below'} the estimate`
  if (percent > 100) return `settling takes ${(1 + percent / 100).toFixed(1)} times the estimate`
  return `the loop settles ${percentOf(percent)} ${percent > 0 ? 'later' : 'sooner'} than the estimate`
}

function carriesClause(pair: Mode): string {
  return `The ${nameOf(pair)} ${carries(pair)}`
}

function carries({ share }: Mode): string {
  return share === null ? 'is the one that the estimate describes' : `carries ${Math.round(100 * share)} % of the response`
}

const pointsOf = (points: number) => `${Math.abs(points).toFixed(1)} points`
const percentOf = (percent: number) => `${Math.abs(percent).toFixed(0)} %`

function nameOf({ place, multiplicity }: Mode): string {
  const times = multiplicity === 1 ? '' : multiplicity === 2 ? 'double ' : multiplicity === 3 ? 'triple ' : `${multiplicity}-fold `
  return `${times}${place.im > 0 ? 'pair' : 'root'} at ${placeWords(place)}`
}

function zeroName(zero: Complex): string {
  return `${zero.im > 0 ? 'zeros' : 'zero'} at ${placeWords(zero)}`
}

function placeWords({ re, im }: Complex): string {
  if (im === 0) return figure(re)
  return `${re === 0 ? '' : `${figure(re)} `}± ${figure(im)}j`
}

function figure(value: number): string {
  return String(Number(value.toPrecision(3)))
}
