import { abs, zero, type Complex } from '../numerics/complex'
import { isZero } from '../numerics/polynomial'
import { roots } from '../numerics/roots'
import { toDegrees } from './angle'
import { loopFunctions } from './controller'
import { describePoint } from './design-point'
import { dominantPole } from './dominant-pole'
import { estimateAt } from './estimate'
import { placeGains, type Placement } from './placement'
import { readAll } from './readings'
import { respondTo, sampleResponse } from './response/response'
import type { Controller, DesignSolution, Gains, LoopModel, Requirement, ResponseOptions } from './types'
import { judge } from './verdicts'

/** Where the design stands: the wanted point, or gains as they are. */
export type DesignTarget = { designPoint: Complex } | { gains: Gains }

export interface SolveOptions {
  requirements?: readonly Requirement[]
  response?: ResponseOptions
}

const usualSettlingBandPercent = 2
/** A root this close to the imaginary axis, against its size, lies on it as far as rounding lets it be told. */
const onAxis = 1e-13

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
  const placement: Placement = 'gains' in target
    ? { gains: target.gains, alternatives: [], leftoverAngle: 0, onLocus: true }
    : placeGains(model, controller, target.designPoint)
  const response = options.response ?? {}
  const { input = 'reference-step', amplitude = 1, settlingBandPercent = usualSettlingBandPercent } = response
  const functions = loopFunctions(model, controller, placement.gains)
  const poles = roots(functions.characteristic)
  const stable = poles.every(pole => pole.re < -onAxis * abs(pole))
  const step = respondTo('reference-step', functions, poles)
  const readings = readAll(functions, poles, stable, step, { amplitude, settlingBandPercent })
  const designPoint = 'designPoint' in target ? target.designPoint : dominantPole(poles, functions.reference) ?? zero
  const verdicts = judge(options.requirements ?? [], readings, poles, stable)
  return {
    gains: placement.gains,
    alternatives: placement.alternatives,
    designPoint: describePoint(designPoint),
    leftoverAngleDeg: toDegrees(placement.leftoverAngle),
    onLocus: placement.onLocus,
    closedLoopPoles: poles,
    closedLoopZeros: isZero(functions.reference.numerator) ? [] : roots(functions.reference.numerator),
    stable,
    response: sampleResponse(input === 'reference-step' ? step : respondTo(input, functions, poles), poles, response),
    readings,
    estimate: estimateAt(designPoint),
    dominance: null,
    verdicts,
    unmet: verdicts.filter(verdict => !verdict.met).length,
  }
}
