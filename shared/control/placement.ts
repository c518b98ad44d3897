import * as complex from '../numerics/complex'
import type { Complex } from '../numerics/complex'
import { wrapAngle } from './angle'
import { effectivePlant, lagPlaces, measuredPlant, openLoop } from './controller'
import { NoAnswerError } from './errors'
import { placeLead } from './lead'
import { placeProportionalDerivative, placeProportionalIntegral, placeRateFeedback, placeThreeTerms } from './three-terms'
import type { Controller, DelayedFunction, Gains, LoopModel } from './types'
import { valuesAt } from './values-at'

/** Gains for a design point. */
export interface Placement {
  gains: Gains
  /** Other admissible gains that reach the same point, in the order that the form fixes. */
  alternatives: Gains[]
  /** Radians in (-pi, pi]: what the angle condition lacks; 0 for forms that reach the point. */
  leftoverAngle: number
  onLocus: boolean
}

/** A leftover angle below this counts as on the locus (1e-6 degrees). */
const onLocusTolerance = 1e-6 * Math.PI / 180

/**
 * Gains that put a closed-loop root at the design point (for the one-gain form: the gain of the magnitude condition, with the angle left over).
 *
 * W. R. Evans, "Control system synthesis by root locus method" (1950), for magnitude and angle condition. Forms with two real gains solve the
 * two real equations of the characteristic equation at the point; at a real point, where both fall together, the condition is a double root there.
 * Gains that come out negative are returned as they are.
 *
 * @param designPoint rad/s, im >= 0
 * @throws NoAnswerError where no gain reaches the point: a zero of the plant, the pole of the controller, no admissible lead
 */
export function placeGains(model: LoopModel, controller: Controller, designPoint: Complex): Placement {
  const placement = place(model, controller, designPoint)
  const figures = [placement.leftoverAngle, ...[placement.gains, ...placement.alternatives].flatMap(gains => Object.values(gains) as number[])]
  if (!figures.every(Number.isFinite)) {
    throw new NoAnswerError('the gains of this design point are too large or too small to compute with', 'designPoint')
  }
  return placement
}

function place(model: LoopModel, controller: Controller, designPoint: Complex): Placement {
  switch (controller.form) {
    case 'gain': return placeOneGain(openLoop(model, controller), designPoint, k => ({ k }))
    case 'lag': return placeOneGain(openLoop(model, controller), designPoint, k => ({ k, ...lagPlaces(controller) }))
    case 'lead': return reached(placeLead(measuredPlant(model), controller.poleZeroRatio, designPoint), controller.alternative)
    case 'pi': return reached([placeProportionalIntegral(measuredPlant(model), designPoint)])
    case 'pd': return reached([placeProportionalDerivative(measuredPlant(model), controller.derivativeFilter ?? 0, designPoint)])
    case 'pid': return reached(placeThreeTerms(measuredPlant(model), controller.derivativeFilter ?? 0, controller.third, designPoint), controller.alternative)
    case 'rate': return reached([placeRateFeedback({ ...effectivePlant(model), deadTime: model.deadTime ?? 0 }, model.sensor ?? { numerator: [1], denominator: [1] }, designPoint)])
  }
}

/** The wanted one of the solutions, or the first where there are fewer; the others keep their order. */
function reached(solutions: Gains[], wanted = 0): Placement {
  const chosen = wanted < solutions.length ? wanted : 0
  return { gains: solutions[chosen]!, alternatives: solutions.filter((_, i) => i !== chosen), leftoverAngle: 0, onLocus: true }
}

/** K = 1/|L0(s)|; leftover angle arg L0(s) - pi. An open-loop pole is reached with no gain at all. */
function placeOneGain(open: DelayedFunction, s: Complex, gainsOf: (k: number) => Gains): Placement {
  const { numerator, denominator } = valuesAt(open, s)
  if (complex.abs(denominator) === 0) return { gains: gainsOf(0), alternatives: [], leftoverAngle: 0, onLocus: true }
  const leftoverAngle = wrapAngle(complex.arg(numerator) - complex.arg(denominator) - Math.PI)
  return {
    gains: gainsOf(complex.abs(denominator) / complex.abs(numerator)),
    alternatives: [],
    leftoverAngle,
    onLocus: Math.abs(leftoverAngle) < onLocusTolerance,
  }
}
