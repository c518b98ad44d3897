import * as polynomial from '../numerics/polynomial'
import { InvalidInputError, NoAnswerError } from './errors'
import { relativeDegree, series } from './transfer-function'
import type { Controller, DelayedFunction, Gains, LoopModel, TransferFunction } from './types'

/** Everything that answers to reference r, disturbance d at the plant input and the loop broken at the plant input. */
export interface LoopFunctions {
  /** Seconds between controller output and plant input. With it L, `reference` and the loop's part of `error` carry a factor e^(-s deadTime) beside what stands here. */
  deadTime: number
  /** L: the loop transfer, controller times plant times sensor; for the rate form G (kp H + kr s). */
  loop: TransferFunction
  /** r to the controller output with the feedback cut. */
  controller: TransferFunction
  /** r to y. */
  reference: TransferFunction
  /** r to the controller output; improper where a derivative acts on the reference. */
  effort: TransferFunction
  /** d to y. */
  disturbance: TransferFunction
  /** r to r - y. */
  error: TransferFunction
  /** The closed loop's denominator without dead time, not normalised; its roots are then the closed-loop poles. */
  characteristic: number[]
}

/** u = (onError (r - H y) - onOutput y) / denominator; only rate feedback takes the output without the sensor. */
export interface ControllerPolynomials {
  onError: number[]
  onOutput: number[]
  denominator: number[]
}

/** Far beyond any machine, and its square is still a number. */
const largest = 1e120
/** What is left of a highest power below this share of it is rounding: 1 + L at infinity is 0 there. */
const cancelled = 1e-12

const gainNames: Record<Controller['form'], readonly string[]> = {
  gain: ['k'], pd: ['kp', 'kd'], pi: ['kp', 'ki'], rate: ['kp', 'kr'], lead: ['k', 'zero', 'pole'],
  lag: ['k', 'zero', 'pole'], pid: ['kp', 'ki', 'kd'],
}

const unity: TransferFunction = { numerator: [1], denominator: [1] }

/** The plant as the controller sees it: an inner rate feedback turns N/D into N/(D + kr s N). */
export function effectivePlant({ plant, rateFeedback }: LoopModel): TransferFunction {
  if (rateFeedback === 0) return inRange({ numerator: polynomial.trim(plant.numerator), denominator: polynomial.trim(plant.denominator) })
  const damping = polynomial.multiplyByPower(polynomial.scale(plant.numerator, rateFeedback), 1)
  const denominator = polynomial.add(plant.denominator, damping)
  if (highestPowerCancels(plant.denominator, damping)) {
    throw new NoAnswerError('the inner rate feedback makes an algebraic loop: the highest power of s cancels', 'loop.rateFeedback')
  }
  return inRange({ numerator: polynomial.trim(plant.numerator), denominator })
}

/** The dead time, the plant and the sensor in series: what a controller that works on the measured error has to master. */
export function measuredPlant(model: LoopModel): DelayedFunction {
  const plant = effectivePlant(model)
  return { ...model.sensor === undefined ? plant : inRange(series(plant, model.sensor)), deadTime: model.deadTime ?? 0 }
}

/**
 * All transfer functions of the loop at given gains.
 * @throws InvalidInputError where the gains are not those of the form
 * @throws NoAnswerError for an algebraic loop (1 + L = 0 at infinity) and for a loop with more zeros than poles
 */
export function loopFunctions(model: LoopModel, controller: Controller, gains: Gains): LoopFunctions {
  const plant = effectivePlant(model)
  const sensor = model.sensor ?? unity
  const { onError, onOutput, denominator } = controllerPolynomials(controller, gains)
  const loop = openLoopOf({ onError, onOutput, denominator }, plant, sensor)
  refuseImproper(loop)
  inRange(loop)
  const characteristic = polynomial.add(loop.denominator, loop.numerator)
  const deadTime = model.deadTime ?? 0
  if (deadTime === 0 && highestPowerCancels(loop.denominator, loop.numerator)) {
    throw new NoAnswerError('the loop is algebraic: 1 + L(s) vanishes as s grows, so no output is defined at these gains')
  }
  const ahead = polynomial.multiply(onError, sensor.denominator)
  const through = polynomial.multiply(ahead, plant.numerator)
  const over = (numerator: number[]) => ({ numerator, denominator: characteristic })
  return {
    deadTime,
    loop,
    controller: { numerator: onError, denominator },
    reference: over(through),
    effort: over(polynomial.multiply(ahead, plant.denominator)),
    disturbance: over(polynomial.multiply(polynomial.multiply(denominator, sensor.denominator), plant.numerator)),
    error: over(polynomial.add(loop.denominator, polynomial.subtract(loop.numerator, through))),
    characteristic,
  }
}

/** Whether nothing but rounding is left of the highest power in p + q. */
function highestPowerCancels(p: polynomial.Polynomial, q: polynomial.Polynomial): boolean {
  const power = Math.max(polynomial.degree(p), polynomial.degree(q))
  const [a, b] = [polynomial.coefficientOf(p, power), polynomial.coefficientOf(q, power)]
  return Math.abs(a + b) <= cancelled * Math.abs(a)
}

/** (onError H + onOutput) G / denominator. */
function openLoopOf({ onError, onOutput, denominator }: ControllerPolynomials, plant: TransferFunction, sensor: TransferFunction): TransferFunction {
  const back = polynomial.add(polynomial.multiply(onError, sensor.numerator), polynomial.multiply(onOutput, sensor.denominator))
  return {
    numerator: polynomial.multiply(back, plant.numerator),
    denominator: polynomial.multiply(polynomial.multiply(denominator, sensor.denominator), plant.denominator),
  }
}

/**
 * L0: the loop transfer without its overall gain, so that L = K L0; its dead time beside it.
 * @param gains needed by the forms with several free gains. For forms with one k it is taken out; for pd, pi, pid and rate the gains stay inside as
 *   they are, so that the overall gain is a factor on all of them, 1 at the present design.
 */
export function openLoop(model: LoopModel, controller: Controller, gains?: Gains): DelayedFunction {
  const loop = openLoopOf(controllerPolynomials(controller, unitGains(controller, gains)), effectivePlant(model), model.sensor ?? unity)
  if (polynomial.isZero(loop.numerator)) throw new NoAnswerError('the gains are zero: there is no loop to analyse', 'gains')
  refuseImproper(loop)
  return { ...inRange(loop), deadTime: model.deadTime ?? 0 }
}

function unitGains(controller: Controller, gains: Gains | undefined): Gains {
  if (controller.form === 'gain') return { k: 1 }
  if (controller.form === 'lag') return { k: 1, ...lagPlaces(controller) }
  if (gains === undefined) {
    throw new NoAnswerError(`the ${controller.form} form has several gains: give the present ones, the analysis runs along their overall factor`, 'gains')
  }
  return 'k' in gains ? { ...gains, k: 1 } : gains
}

/** Zero and pole of a lag, both fixed by its form. */
export function lagPlaces({ poleZeroRatio, zero }: { poleZeroRatio: number, zero: number }): { zero: number, pole: number } {
  return { zero, pole: poleZeroRatio * zero }
}

/** @throws InvalidInputError where the gains are not those of the form */
export function controllerPolynomials(controller: Controller, gains: Gains): ControllerPolynomials {
  const names = gainNames[controller.form]
  if (Object.keys(gains).length !== names.length || !names.every(name => name in gains)) {
    throw new InvalidInputError('gains', `the ${controller.form} form has the gains ${names.join(', ')}`)
  }
  // The check above ties the gains to the form; the compiler cannot see it.
  const given = gains as unknown as Record<string, number>
  const { k = 0, kp = 0, kd = 0, ki = 0, kr = 0, zero = 0, pole = 0 } = given
  const onError = (numerator: number[], denominator: number[]) => ({ onError: polynomial.trim(numerator), onOutput: [0], denominator })
  switch (controller.form) {
    case 'gain': {
      const shape = controllerShape(controller)
      return onError(polynomial.scale(shape.numerator, k), shape.denominator)
    }
    case 'lead':
    case 'lag': return onError([k, -k * zero], [1, -pole])
    case 'rate': return { onError: [kp], onOutput: polynomial.trim([kr, 0]), denominator: [1] }
    case 'pi': return onError(...threeTerms(kp, ki, 0, 0))
    case 'pd': return onError(...threeTerms(kp, 0, kd, controller.derivativeFilter ?? 0))
    case 'pid': return onError(...threeTerms(kp, ki, kd, controller.derivativeFilter ?? 0))
  }
}

/**
 * kp + ki/s + kd s/(filter s + 1) as one fraction. A term whose gain is zero leaves no pole behind: keeping s/s would show a closed-loop root that
 * nothing drives.
 */
function threeTerms(kp: number, ki: number, kd: number, filter: number): [numerator: number[], denominator: number[]] {
  const integrator = ki === 0 ? [1] : [1, 0]
  const lag = kd === 0 || filter === 0 ? [1] : [filter, 1]
  const proportional = polynomial.scale(polynomial.multiply(integrator, lag), kp)
  const integral = polynomial.scale(lag, ki)
  const derivative = polynomial.scale(polynomial.multiply(integrator, [1, 0]), kd)
  return [polynomial.add(polynomial.add(proportional, integral), derivative), polynomial.multiply(integrator, lag)]
}

/** C0 of the `gain` form; 1 where none is given. */
function controllerShape(controller: { shape?: TransferFunction }): TransferFunction {
  const { numerator, denominator } = controller.shape ?? { numerator: [1], denominator: [1] }
  if (polynomial.isZero(numerator)) throw new InvalidInputError('controller.shape.numerator', 'the numerator of the controller shape is zero')
  if (polynomial.isZero(denominator)) throw new InvalidInputError('controller.shape.denominator', 'the denominator of the controller shape is zero')
  return { numerator: polynomial.trim(numerator), denominator: polynomial.trim(denominator) }
}

function refuseImproper(loop: TransferFunction): void {
  if (!polynomial.isZero(loop.numerator) && relativeDegree(loop) < 0) {
    throw new NoAnswerError('the loop has more zeros than poles: the controller differentiates more than the plant smooths')
  }
}

/**
 * The same transfer function, its coefficients checked to lie in a range in which products of them neither overflow nor vanish.
 * @throws NoAnswerError else
 */
function inRange(g: TransferFunction): TransferFunction {
  const outside = (coefficient: number) => coefficient !== 0 && !(Math.abs(coefficient) >= 1 / largest && Math.abs(coefficient) <= largest)
  if (g.numerator.some(outside) || g.denominator.some(outside)) {
    throw new NoAnswerError('the numbers of this loop are too large or too small to compute with: choose units nearer to its size')
  }
  return g
}
