import { solveLinear } from '../../numerics/linear'
import { degree, isZero, leading } from '../../numerics/polynomial'
import { roots } from '../../numerics/roots'
import { controllerPolynomials } from '../controller'
import { NoAnswerError } from '../errors'
import { realise, sectionsOf } from '../response/state-space'
import type { Controller, Gains, TransferFunction } from '../types'

/**
 * A controller as it runs at the samples: c(k+1) = A c(k) + onError e(k) + onOutput y(k), u(k) = row c(k) + errorGain e(k) + outputGain y(k).
 */
export interface SampledController {
  /** n*n entries, row after row. */
  matrix: Float64Array
  onError: Float64Array
  onOutput: Float64Array
  row: Float64Array
  errorGain: number
  outputGain: number
}

/**
 * The controller at a sample period: integral by the trapezoidal rule, derivatives as differences (with a filter by the backward rule, so that no filter however
 * short makes it ring), fixed shapes, leads and lags by the bilinear rule (A. Tustin, 1947), which keeps their gain at rest.
 * @param period seconds
 * @throws NoAnswerError for a fixed shape with more zeros than poles
 */
export function sampledController(controller: Controller, gains: Gains, period: number): SampledController {
  const given = gains as unknown as Record<string, number>
  const { kp = 0, kd = 0, ki = 0, kr = 0 } = given
  switch (controller.form) {
    case 'gain':
    case 'lead':
    case 'lag': {
      const { onError, denominator } = controllerPolynomials(controller, gains)
      return bilinear({ numerator: onError, denominator }, period)
    }
    case 'rate': return parallel(kp, [{ ...state(0), onOutput: 1, row: kr / period }], -kr / period)
    case 'pi': return parallel(kp + ki * period / 2, [integral(ki, period)])
    case 'pd': return withDerivative(kp, kd, controller.derivativeFilter ?? 0, period, [])
    case 'pid': return withDerivative(kp + ki * period / 2, kd, controller.derivativeFilter ?? 0, period, [integral(ki, period)])
  }
}

/** One state: c(k+1) = pole c + onError e + onOutput y, adding row c to u. */
interface State { pole: number, onError: number, onOutput: number, row: number }

const state = (pole: number): State => ({ pole, onError: 0, onOutput: 0, row: 1 })

/** Half of the newest error counts at once (see the error gain), the other half from the next sample on. */
const integral = (ki: number, period: number): State => ({ ...state(1), onError: ki * period })

/** d(k) = a d(k-1) + b (e(k) - e(k-1)), a = filter/(filter + period), b = kd/(filter + period). */
function withDerivative(errorGain: number, kd: number, filter: number, period: number, others: State[]): SampledController {
  const a = filter / (filter + period)
  const b = kd / (filter + period)
  return parallel(errorGain + b, [...others, { ...state(a), onError: (a - 1) * b }])
}

function parallel(errorGain: number, states: State[], outputGain = 0): SampledController {
  const n = states.length
  const matrix = new Float64Array(n * n)
  states.forEach(({ pole }, i) => { matrix[i * n + i] = pole })
  return {
    matrix,
    onError: Float64Array.from(states, one => one.onError),
    onOutput: Float64Array.from(states, one => one.onOutput),
    row: Float64Array.from(states, one => one.row),
    errorGain,
    outputGain,
  }
}

/** s = (2/period)(z - 1)/(z + 1) in a state-space form, which loses no digits where poles crowd at z = 1. */
function bilinear(c: TransferFunction, period: number): SampledController {
  if (degree(c.numerator) > degree(c.denominator)) {
    throw new NoAnswerError('a controller shape with more zeros than poles cannot be computed at samples: give it as many poles', 'controller.shape.numerator')
  }
  const system = realise(sectionsOf(roots(c.denominator)), c.denominator)
  const n = system.input.length
  const direct = degree(c.numerator) === degree(c.denominator) && !isZero(c.numerator) ? leading(c.numerator) / leading(c.denominator) : 0
  const weights = system.outputOf(c.numerator)
  const ahead = identityWith(system.matrix, n, -period / 2)
  const back = identityWith(system.matrix, n, period / 2)
  const matrix = solveLinear(ahead, back, n, n)
  const onError = solveLinear(ahead, system.input.map(entry => entry * period), n, 1)
  const transposed = Float64Array.from({ length: n * n }, (_, i) => ahead[(i % n) * n + Math.floor(i / n)]!)
  const row = solveLinear(transposed, weights, n, 1)
  const errorGain = direct + weights.reduce((sum, weight, i) => sum + weight * onError[i]! / 2, 0)
  return { matrix, onError, onOutput: new Float64Array(n), row, errorGain, outputGain: 0 }
}

/** I + factor A. */
function identityWith(a: Float64Array, n: number, factor: number): Float64Array {
  const result = a.map(entry => entry * factor)
  for (let i = 0; i < n; i++) result[i * n + i]! += 1
  return result
}
