import { zero, type Complex } from '../numerics/complex'
import { isZero } from '../numerics/polynomial'
import { roots } from '../numerics/roots'
import { toDegrees } from './angle'
import { loopFunctions } from './controller'
import { InvalidInputError, NoAnswerError } from './errors'
import { describePoint } from './design-point'
import { dominantPole } from './dominant-pole'
import { estimateAt } from './estimate'
import { placeGains, type Placement } from './placement'
import { readAll } from './readings'
import { respondTo, sampleResponse } from './response/response'
import { diesOut } from './stability'
import { uncertainFigures } from './uncertainty'
import type { Controller, DesignSolution, Gains, LoopModel, Requirement, ResponseOptions } from './types'
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
  const functions = loopFunctions(model, controller, placement.gains)
  const poles = roots(functions.characteristic)
  const stable = poles.every(diesOut)
  const step = respondTo('reference-step', functions, poles)
  const readings = readAll(functions, poles, stable, step, { amplitude, settlingBandPercent })
  const designPoint = asked ?? dominantPole(poles, functions.reference) ?? zero
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
    uncertain: uncertainFigures(functions, poles, stable, readings, { amplitude, settlingBandPercent }),
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
