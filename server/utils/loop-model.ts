import { InvalidInputError } from '#shared/control/errors'
import { transferFunction } from '#shared/control/transfer-function'
import type { Controller, LoopModel, ThirdCondition, TransferFunction } from '#shared/control/types'
import type { Complex } from '#shared/numerics/complex'
import { fromRoots, isZero, trim } from '#shared/numerics/polynomial'
import { limits } from '#shared/schemas/limits'
import type { ControllerForm, Loop, Plant } from '#shared/schemas/loop'
import { parseFormula } from './expression/parse-formula'

/**
 * The loop of a request in rational form, whichever way its plant was given.
 *
 * @param path the field of the request that carries the loop
 * @throws InvalidInputError for a plant that is no proper ratio of polynomials, with the field to change
 */
export function resolveLoop(loop: Loop, path = 'loop'): LoopModel {
  const sensor = loop.sensor === undefined ? {} : { sensor: resolvePlant(loop.sensor, `${path}.sensor`, 'sensor') }
  return {
    plant: resolvePlant(loop.plant, `${path}.plant`),
    ...sensor,
    rateFeedback: loop.rateFeedback ?? 0,
    deadTime: loop.deadTime ?? 0,
    actuatorLimit: loop.actuatorLimit,
    sampling: loop.samplePeriod === undefined ? undefined : { period: loop.samplePeriod, computingDelay: loop.computingDelay === 'one-sample' },
  }
}

/** The controller, when its form is available. */
export function resolveController(controller: ControllerForm, path = 'controller'): Controller {
  if (controller.form === 'pid') {
    const { derivativeFilter, alternative } = controller
    return { form: 'pid', derivativeFilter, third: thirdCondition(controller, path), alternative }
  }
  if (controller.form === 'gain' && controller.shape !== undefined) {
    const shape = properRatio(controller.shape.numerator, controller.shape.denominator, `${path}.shape`, { improperAllowed: true })
    return { form: 'gain', shape }
  }
  return controller
}

function thirdCondition({ integralToDerivativeRatio, thirdPole }: Extract<ControllerForm, { form: 'pid' }>, path: string): ThirdCondition {
  if ((integralToDerivativeRatio === undefined) === (thirdPole === undefined)) {
    throw new InvalidInputError(path, 'give exactly one of integralToDerivativeRatio and thirdPole: it settles the third gain')
  }
  return thirdPole === undefined ? { integralToDerivativeRatio: integralToDerivativeRatio! } : { pole: thirdPole }
}

function resolvePlant(plant: Plant, path: string, noun = 'plant'): TransferFunction {
  switch (plant.form) {
    case 'expression': {
      const { numerator, denominator } = parseFormula(plant, path)
      return properRatio(numerator, denominator, path, { numerator: `${path}.expression`, denominator: `${path}.expression`, noun })
    }
    case 'coefficients':
      return properRatio(plant.numerator, plant.denominator, path, { noun })
    case 'zeros-poles-gain': {
      if (plant.gain === 0) throw new InvalidInputError(`${path}.gain`, `the gain is zero: such a ${noun} closes no loop`)
      const zeros = closedUnderConjugation(plant.zeros, `${path}.zeros`)
      const poles = closedUnderConjugation(plant.poles, `${path}.poles`)
      return properRatio(fromRoots(zeros, plant.gain), fromRoots(poles), path, { numerator: `${path}.zeros`, denominator: `${path}.poles`, noun })
    }
  }
}

interface Fields {
  numerator?: string
  denominator?: string
  improperAllowed?: boolean
  noun?: string
}

function properRatio(numerator: number[], denominator: number[], path: string, fields: Fields = {}): TransferFunction {
  const { numerator: above = `${path}.numerator`, denominator: below = `${path}.denominator`, improperAllowed = false, noun = 'controller' } = fields
  if (isZero(denominator)) throw new InvalidInputError(below, 'the denominator is zero')
  if (isZero(numerator)) throw new InvalidInputError(above, `the numerator is zero: such a ${noun} does not answer its input`)
  for (const [coefficients, field] of [[numerator, above], [denominator, below]] as const) {
    if (!coefficients.every(Number.isFinite)) throw new InvalidInputError(field, 'the coefficients grow beyond what can be computed')
  }
  const ratio = transferFunction(trim(numerator), trim(denominator))
  const [zeros, poles] = [ratio.numerator.length - 1, ratio.denominator.length - 1]
  if (Math.max(zeros, poles) > limits.plantOrder) throw new InvalidInputError(poles >= zeros ? below : above, `the order is beyond ${limits.plantOrder}`)
  if (zeros > poles && !improperAllowed) {
    throw new InvalidInputError(above, `the numerator has order ${zeros}, the denominator ${poles}: such a ${noun} is improper: it would answer before it is asked`)
  }
  return ratio
}

/** Pairs that differ in the last bits count as conjugates, since lists are often rounded on their way here; they are made exact. */
const pairTolerance = 1e-9

function closedUnderConjugation(places: Complex[], path: string): Complex[] {
  const exact = places.filter(place => place.im === 0)
  const open = places.map((place, index) => ({ place, index })).filter(({ place }) => place.im !== 0)
  for (let first = open.shift(); first !== undefined; first = open.shift()) {
    const { place, index } = first
    const partner = open.findIndex(({ place: other }) =>
      Math.hypot(other.re - place.re, other.im + place.im) <= pairTolerance * Math.hypot(place.re, place.im))
    if (partner < 0) throw new InvalidInputError(`${path}.${index}`, 'the conjugate is missing: complex places come in pairs')
    open.splice(partner, 1)
    exact.push(place, { re: place.re, im: -place.im })
  }
  return exact
}
