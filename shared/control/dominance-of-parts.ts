import { abs, distance, type Complex } from '../numerics/complex'
import { evaluateComplex, isZero } from '../numerics/polynomial'
import { roots } from '../numerics/roots'
import { closeLoop, type ClosedLoop } from './closed-loop'
import { evaluateQuasi } from './delay/quasi-polynomial'
import { deviation, stepShape, type StepShape } from './deviation-cause'
import { dominance } from './dominance'
import { partSentence } from './dominance-sentence'
import { NoAnswerError } from './errors'
import { readAll } from './readings'
import type { Controller, DesignSolution, Gains, LoopModel } from './types'

/** The parts of a loop that are neither roots nor zeros, each with the loop that lacks it. */
const parts: { name: string, isIn: (model: LoopModel) => boolean, without: (model: LoopModel) => LoopModel }[] = [
  { name: 'limit on the controller output', isIn: model => model.actuatorLimit !== undefined, without: model => ({ ...model, actuatorLimit: undefined }) },
  { name: 'sampling', isIn: model => model.sampling !== undefined, without: model => ({ ...model, sampling: undefined }) },
  { name: 'dead time', isIn: model => (model.deadTime ?? 0) > 0, without: model => ({ ...model, deadTime: 0 }) },
]

/** Where the design stands, and what its whole loop does. */
export interface Standing {
  designPoint: Complex
  estimate: DesignSolution['estimate']
  onLocus: boolean
  amplitude: number
  /** Of the whole loop; null without a final value other than 0. */
  shape: StepShape | null
}

/**
 * `dominance` for any loop: where a dead time, the sampling or a limit parts the loop from its estimate by what is worth saying, the sentence names the one without
 * which most of the difference is gone, with its computed effect; where none does, roots and zeros are looked at as in a rational loop.
 */
export function dominanceOfParts(model: LoopModel, controller: Controller, gains: Gains, closed: ClosedLoop, standing: Standing): DesignSolution['dominance'] {
  const { designPoint, estimate, onLocus, shape } = standing
  const zeros = isZero(closed.functions.reference.numerator) ? [] : roots(closed.functions.reference.numerator)
  const present = parts.filter(part => part.isIn(model))
  if (present.length === 0) return dominance({ poles: closed.poles, zeros, stable: closed.stable, shape }, designPoint, estimate, onLocus)
  const bare = present.reduce((rest, part) => part.without(rest), model)
  const rational = closedOrNull(bare, controller, gains)
  const plain = rational === null ? null : dominance(
    { poles: rational.poles, zeros, stable: rational.stable, shape: shapeIn(rational, standing.amplitude) }, designPoint, estimate, onLocus && !hasDelay(model))
  if (plain === null || closed.poles.length === 0) return plain
  return { ...plain, ...placesAbout(closed, zeros, designPoint, model.sampling !== undefined), sentence: sentenceOn(model, controller, gains, closed, standing) ?? plain.sentence }
}

function sentenceOn(model: LoopModel, controller: Controller, gains: Gains, closed: ClosedLoop, { estimate, shape, amplitude }: Standing): string | null {
  if (!closed.stable) {
    const cause = parts.find(part => part.isIn(model) && closedOrNull(part.without(model), controller, gains)?.stable)
    return cause ? `The ${cause.name} makes this loop unstable: without it it is stable.` : null
  }
  const { overshootPercent, settlingTime } = estimate
  if (shape === null || overshootPercent === null || settlingTime === null) return null
  const tried = parts.filter(part => part.isIn(model)).flatMap((part) => {
    const lacking = closedOrNull(part.without(model), controller, gains)
    const without = lacking && shapeIn(lacking, amplitude)
    return without === null ? [] : [{ name: part.name, without, effect: deviation(shape, without) }]
  })
  const most = tried.sort((a, b) => b.effect - a.effect)[0]
  // From 1 on a deviation is worth saying.
  return most && most.effect > 1 ? partSentence(most.name, shape, most.without, { overshootPercent, settlingTime }) : null
}

/** The loop without a part may be algebraic, where the dead time alone kept it from that. */
function closedOrNull(model: LoopModel, controller: Controller, gains: Gains): ClosedLoop | null {
  try {
    return closeLoop(model, controller, gains)
  }
  catch (error) {
    if (error instanceof NoAnswerError) return null
    throw error
  }
}

function shapeIn(closed: ClosedLoop, amplitude: number): StepShape | null {
  if (!closed.stable) return null
  try {
    const step = closed.respondTo('reference-step', amplitude)
    return stepShape(readAll(closed, step, { amplitude, settlingBandPercent: 2 }), step.output, 2)
  }
  catch (error) {
    // The loop without this part may be harder to follow than the one with it, or have no response at all: then the part has no say.
    if (error instanceof NoAnswerError) return null
    throw error
  }
}

/** The figures of the root nearest the design point. With dead time its share is that among the roots near the origin; sampled roots have none. */
function placesAbout({ poles, functions, stable }: ClosedLoop, zeros: readonly Complex[], designPoint: Complex, isSampled: boolean): Omit<NonNullable<DesignSolution['dominance']>, 'sentence'> {
  const upper = poles.filter(({ im }) => im >= 0)
  const pair = upper.reduce((nearest, pole) => distance(pole, designPoint) < distance(nearest, designPoint) ? pole : nearest)
  const others = upper.filter(pole => pole !== pair).map(({ re }) => re)
  const ratio = Math.max(...others) / pair.re
  const { deadTime, loop, reference } = functions
  const weight = (pole: Complex) => (pole.im > 0 ? 2 : 1) * abs(evaluateComplex(reference.numerator, pole)) * Math.exp(-pole.re * deadTime)
    / abs(evaluateQuasi({ ...loop, deadTime }, pole).slope) / abs(pole)
  const share = weight(pair) / upper.reduce((sum, pole) => sum + weight(pole), 0)
  return {
    residueShare: isSampled || !stable || !Number.isFinite(share) ? null : share,
    nextPoleRatio: others.length > 0 && Number.isFinite(ratio) ? ratio + 0 : null,
    nearestZeroDistance: zeros.length === 0 ? null : Math.min(...zeros.map(zero => distance(zero, pair))),
  }
}

const hasDelay = (model: LoopModel) => (model.deadTime ?? 0) > 0
