import { distance, type Complex } from '../numerics/complex'
import { deviationCause, shapeOfPair, type StepShape } from './deviation-cause'
import {
  agreeingSentence, differingSentence, noFinalValueSentence, offLocusSentence, roughRuleSentence, shareSentence, unstableSentence,
} from './dominance-sentence'
import { estimateAt, worthSaying } from './estimate'
import { modesOf, type Mode } from './modes'
import type { DesignSolution } from './types'

/** A root with less of the response than this is one that a zero takes away. */
const hidden = 1e-9

interface ClosedLoop {
  poles: readonly Complex[]
  zeros: readonly Complex[]
  stable: boolean
  /** Of the whole loop, settling to 2 %; null without a final value other than 0. */
  shape: StepShape | null
}

/**
 * How far the pair nearest the design point speaks for the whole loop: its share of the step response, how much faster the next slowest root is, how
 * far the nearest zero, and one sentence on what makes the loop differ from the second-order estimate, with figures computed by leaving it out.
 * The definitions are those of docs/method.md; figures that do not exist are null. null where there is no closed-loop root.
 *
 * Sources: K. Ogata, "Modern Control Engineering", and N. S. Nise, "Control Systems Engineering", on dominant poles and the effect of further poles
 * and zeros.
 * @param estimate the rules of thumb at the design point
 * @param onLocus whether a root lies at the design point
 */
export function dominance(loop: ClosedLoop, designPoint: Complex, estimate: DesignSolution['estimate'], onLocus: boolean): DesignSolution['dominance'] {
  // Without a final value or a zero that takes it away the output does not move at all, and nothing has a share of that.
  const moves = loop.shape !== null || loop.zeros.length > 0
  const modes = modesOf(loop.poles, loop.zeros, loop.stable && moves)
  if (modes.length === 0) return null
  const pair = modes.reduce((nearest, mode) => distance(mode.place, designPoint) < distance(nearest.place, designPoint) ? mode : nearest)
  return {
    sentence: sentenceOn(loop, pair, modes, estimate, onLocus),
    residueShare: pair.share,
    nextPoleRatio: nextPoleRatio(pair, modes),
    nearestZeroDistance: loop.zeros.length === 0 ? null : Math.min(...loop.zeros.map(zero => distance(zero, pair.place))),
  }
}

function nextPoleRatio(pair: Mode, modes: readonly Mode[]): number | null {
  const others = modes.filter(mode => mode !== pair && (mode.share === null || mode.share > hidden))
  const ratio = Math.max(...others.map(({ place }) => place.re)) / pair.place.re
  return others.length > 0 && Number.isFinite(ratio) ? ratio + 0 : null
}

function sentenceOn(loop: ClosedLoop, pair: Mode, modes: readonly Mode[], estimate: DesignSolution['estimate'], onLocus: boolean): string {
  if (!loop.stable) return unstableSentence(modes.reduce((most, mode) => mode.place.re > most.place.re ? mode : most))
  const { shape } = loop
  if (shape === null) return noFinalValueSentence()
  const asked = shapeOfEstimate(estimate)
  const atPair = shapeOfEstimate(estimateAt(pair.place))
  if (!onLocus && (asked === null || atPair === null || differ(atPair, asked))) return offLocusSentence(pair, shape, asked)
  if (asked !== null && !differ(shape, asked)) return agreeingSentence(pair)
  const alone = shapeOfPair(pair)
  if (alone === null || asked === null) return shareSentence(pair)
  if (!differ(shape, alone)) return roughRuleSentence(pair, shape, asked)
  const cause = deviationCause(pair, modes, loop.zeros, shape, alone)
  return cause.suspects.length === 0 ? roughRuleSentence(pair, shape, asked) : differingSentence(pair, shape, asked, cause)
}

function differ(shape: StepShape, other: StepShape): boolean {
  return Math.abs(shape.overshootPercent - other.overshootPercent) > worthSaying.points
    || Math.abs(shape.settlingTime / other.settlingTime - 1) > worthSaying.percent / 100
}

function shapeOfEstimate({ overshootPercent, settlingTime }: DesignSolution['estimate']): StepShape | null {
  return overshootPercent === null || settlingTime === null ? null : { overshootPercent, settlingTime }
}
