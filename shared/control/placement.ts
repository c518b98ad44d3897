import * as complex from '../numerics/complex'
import type { Complex } from '../numerics/complex'
import { evaluateAccurately } from '../numerics/compensated'
import * as polynomial from '../numerics/polynomial'
import { wrapAngle } from './angle'
import { effectivePlant, openLoop } from './controller'
import { NoAnswerError } from './errors'
import { placeLead } from './lead'
import type { Controller, Gains, LoopModel, TransferFunction } from './types'
import { valuesAt } from './values-at'

/** Gains for a design point. */
export interface Placement {
  gains: Gains
  /** Other admissible gains that reach the same point. */
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
    case 'gain': return placeOneGain(openLoop(model, controller), designPoint)
    case 'lead': return reached(placeLead(effectivePlant(model), controller.poleZeroRatio, designPoint))
    case 'pi': {
      const { kp, ki } = placeProportionalIntegral(effectivePlant(model), designPoint)
      return reached([{ kp, ki: orNothing(ki, kp, 1 / complex.abs(designPoint)) }])
    }
    case 'pd': {
      const { constant, slope } = lineThrough(effectivePlant(model), designPoint)
      return reached([{ kp: constant, kd: orNothing(slope, constant, complex.abs(designPoint)) }])
    }
    case 'rate': {
      const { constant, slope } = lineThrough(effectivePlant(model), designPoint)
      return reached([{ kp: constant, kr: orNothing(slope, constant, complex.abs(designPoint)) }])
    }
  }
}

/** What rounding leaves of a gain that should be 0: where the other gain does all the work, the sign of a last digit is no advice. */
function orNothing(gain: number, other: number, weight: number): number {
  return Math.abs(gain) * weight <= 1e-13 * Math.abs(other) ? 0 : gain
}

function reached([gains, ...alternatives]: Gains[]): Placement {
  return { gains: gains!, alternatives, leftoverAngle: 0, onLocus: true }
}

/** K = 1/|L0(s)|; leftover angle arg L0(s) - pi. An open-loop pole is reached with no gain at all. */
function placeOneGain(open: TransferFunction, s: Complex): Placement {
  const { numerator, denominator } = valuesAt(open, s)
  if (complex.abs(denominator) === 0) return { gains: { k: 0 }, alternatives: [], leftoverAngle: 0, onLocus: true }
  const leftoverAngle = wrapAngle(complex.arg(numerator) - complex.arg(denominator) - Math.PI)
  return {
    gains: { k: complex.abs(denominator) / complex.abs(numerator) },
    alternatives: [],
    leftoverAngle,
    onLocus: Math.abs(leftoverAngle) < onLocusTolerance,
  }
}

/**
 * Real numbers with constant + slope s = -D(s)/N(s) at the point: the gains of a PD or of rate feedback. At a real point the line is the
 * tangent of -D/N there, which makes the point a double root.
 */
function lineThrough(plant: TransferFunction, s: Complex): { constant: number, slope: number } {
  if (s.im === 0) {
    const { value, slope } = wantedOnRealAxis(plant, s.re)
    return { constant: value - slope * s.re, slope }
  }
  const wanted = wantedController(plant, s)
  const slope = wanted.im / s.im
  return { constant: wanted.re - slope * s.re, slope }
}

/** kp + ki/s = -D/N; at a real point in value and slope. */
function placeProportionalIntegral(plant: TransferFunction, s: Complex): { kp: number, ki: number } {
  const square = s.re * s.re + s.im * s.im
  if (square === 0) throw new NoAnswerError('the design point lies on the integrator of the PI controller, where no gains put a root', 'designPoint')
  if (s.im === 0) {
    const { value, slope } = wantedOnRealAxis(plant, s.re)
    return { kp: value + slope * s.re, ki: -slope * square }
  }
  const wanted = wantedController(plant, s)
  const ki = -wanted.im * square / s.im
  return { kp: wanted.re - ki * s.re / square, ki }
}

/** -D(s)/N(s): what the controller must be worth at s. */
function wantedController(plant: TransferFunction, s: Complex): Complex {
  const { numerator, denominator } = valuesAt(plant, s)
  return complex.negate(complex.divide(denominator, numerator))
}

/** -D/N and its slope at a real place. */
function wantedOnRealAxis(plant: TransferFunction, x: number): { value: number, slope: number } {
  const { numerator: { re: n }, denominator: { re: d } } = valuesAt(plant, { re: x, im: 0 })
  const slopeOf = (p: number[]) => evaluateAccurately(polynomial.derivative(p), { re: x, im: 0 }).re
  return { value: -d / n, slope: (d * slopeOf(plant.numerator) - n * slopeOf(plant.denominator)) / (n * n) }
}
