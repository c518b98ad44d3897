import { zero, type Complex } from '../numerics/complex'
import { isZero } from '../numerics/polynomial'
import { roots } from '../numerics/roots'
import { toDegrees } from './angle'
import { closeLoop } from './closed-loop'
import { InvalidInputError, NoAnswerError } from './errors'
import { describePoint } from './design-point'
import { stepShape } from './deviation-cause'
import { dominanceOfParts } from './dominance-of-parts'
import { dominantPole } from './dominant-pole'
import { estimateAt } from './estimate'
import { placeGains, type Placement } from './placement'
import { readAll } from './readings'
import { sampleResponse } from './response/response'
import { steadyState } from './steady-state-figures'
import type { ContinuousDesign, Controller, DesignSolution, Gains, LoopModel, Requirement, ResponseOptions } from './types'
import { uncertainFigures } from './uncertainty'
import { judge } from './verdicts'

/** Where the design stands: the wanted point, or gains as they are. */
export type DesignTarget = { designPoint: Complex } | { gains: Gains }

export interface SolveOptions {
  requirements?: readonly Requirement[]
  response?: ResponseOptions
}

const usualSettlingBandPercent = 2

/**
 * The design: gains that put a closed-loop root at the design point (or as near as the form allows), and everything the whole loop then does.
 *
 * Given `gains` instead, the loop is evaluated as it is, and `designPoint` is its dominant pole (see `dominantPole`).
 * Readings always describe the reference step of the given amplitude; `response` is what `options.response.input` asks for. Every number of
 * the answer is finite; figures that do not exist are null. An unstable loop is an answer.
 *
 * @param target design point in rad/s, im >= 0
 * @throws NoAnswerError for an algebraic loop and where no gains reach the point
 * @throws InvalidInputError where the gains are not those of the form
 */
export function solveDesign(model: LoopModel, controller: Controller, target: DesignTarget, options: SolveOptions = {}): DesignSolution {
  const placement = placementOf(model, controller, target)
  try {
    const solution = evaluate(model, controller, placement, 'designPoint' in target ? target.designPoint : null, options)
    if (isFinite(solution)) return solution
  }
  catch (error) {
    // The numerics refuse what overflowed on the way to them.
    if (!(error instanceof RangeError)) throw error
  }
  throw new NoAnswerError('the coefficients of this loop span a wider range than numbers have: choose other units or smaller gains')
}

function evaluate(model: LoopModel, controller: Controller, placement: Placement, asked: Complex | null, options: SolveOptions): DesignSolution {
  const response = options.response ?? {}
  const { input = 'reference-step', amplitude = 1, settlingBandPercent = usualSettlingBandPercent } = response
  const closed = closeLoop(model, controller, placement.gains)
  const { functions, poles, stable } = closed
  const step = closed.respondTo('reference-step', amplitude)
  const readings = readAll(closed, step, { amplitude, settlingBandPercent })
  const shown = sampleResponse(input === 'reference-step' ? step : closed.respondTo(input, amplitude), poles, response)
  const continuous = model.sampling === undefined
    ? undefined
    : withoutSampling(model, controller, placement.gains, { ...response, duration: shown.time[shown.time.length - 1]! })
  // Gains belong to points of the continuous loop, whether or not the controller is sampled.
  const designPoint = asked ?? dominantPole(continuous?.closedLoopPoles ?? poles, functions) ?? zero
  const estimate = estimateAt(designPoint)
  const zeros = isZero(functions.reference.numerator) ? [] : roots(functions.reference.numerator)
  const verdicts = judge(options.requirements ?? [], readings, poles, stable)
  return {
    gains: placement.gains,
    alternatives: placement.alternatives,
    designPoint: describePoint(designPoint),
    leftoverAngleDeg: toDegrees(placement.leftoverAngle),
    onLocus: placement.onLocus,
    closedLoopPoles: poles,
    closedLoopZeros: zeros,
    stable,
    response: shown,
    readings,
    estimate,
    dominance: dominanceOfParts(model, controller, placement.gains, closed, {
      designPoint, estimate, onLocus: placement.onLocus, amplitude, shape: stepShape(readings, step.output, settlingBandPercent),
    }),
    steadyState: steadyState(closed, amplitude),
    verdicts,
    unmet: verdicts.filter(verdict => !verdict.met).length,
    uncertain: isRational(model) ? uncertainFigures(closed, readings, { amplitude, settlingBandPercent }) : [],
    ...(continuous === undefined ? {} : { continuous }),
  }
}

/** Whether roots and zeros are all there is to the loop. */
function isRational({ deadTime = 0, actuatorLimit, sampling }: LoopModel): boolean {
  return deadTime === 0 && actuatorLimit === undefined && sampling === undefined
}

/** The loop as it was designed, over the same time. */
function withoutSampling(model: LoopModel, controller: Controller, gains: Gains, response: ResponseOptions): ContinuousDesign | undefined {
  const { input = 'reference-step', amplitude = 1, settlingBandPercent = usualSettlingBandPercent } = response
  try {
    const closed = closeLoop({ ...model, sampling: undefined }, controller, gains)
    const step = closed.respondTo('reference-step', amplitude)
    return {
      stable: closed.stable,
      closedLoopPoles: closed.poles,
      response: sampleResponse(input === 'reference-step' ? step : closed.respondTo(input, amplitude), closed.poles, response),
      readings: readAll(closed, step, { amplitude, settlingBandPercent }),
    }
  }
  catch (error) {
    // What has an answer at samples need not have one without them (an ideal derivative behind a dead time).
    if (error instanceof NoAnswerError) return undefined
    throw error
  }
}

function isFinite({ gains, closedLoopPoles, closedLoopZeros, response, estimate }: DesignSolution): boolean {
  const numbers = [...Object.values(gains), ...Object.values(estimate).filter(figure => figure !== null)]
  for (const { re, im } of [...closedLoopPoles, ...closedLoopZeros]) numbers.push(re, im)
  return numbers.every(Number.isFinite) && response.output.every(Number.isFinite) && response.effort.every(Number.isFinite)
}

/** The placement of a design target: for gains as they are, those gains. */
export function placementOf(model: LoopModel, controller: Controller, target: DesignTarget): Placement {
  if ('gains' in target) {
    if (!Object.values(target.gains).every(Number.isFinite)) throw new InvalidInputError('gains', 'gains are finite numbers')
    return { gains: target.gains, alternatives: [], leftoverAngle: 0, onLocus: true }
  }
  const { re, im } = target.designPoint
  if (!Number.isFinite(re) || !Number.isFinite(im)) throw new InvalidInputError('designPoint', 'a design point is a pair of finite numbers')
  if (im < 0) throw new InvalidInputError('designPoint.im', 'a design point has im >= 0; its conjugate is implied')
  return placeGains(model, controller, target.designPoint)
}
