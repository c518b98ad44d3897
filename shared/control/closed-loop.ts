import type { Complex } from '../numerics/complex'
import { roots } from '../numerics/roots'
import { loopFunctions, type LoopFunctions } from './controller'
import { delayedLoop } from './delay/delayed-loop'
import { NoAnswerError } from './errors'
import type { PointwiseLoop } from './frequency/along-grid'
import { bandwidth } from './frequency/bandwidth'
import { margins, type Margins } from './frequency/margins'
import { sensitivityPeak } from './frequency/sensitivity'
import { limitedResponse } from './limited/limited-response'
import { respondTo, type LoopResponse } from './response/response'
import { stationaryError } from './response/steady-state'
import { fullWork, type Work } from './response/work'
import { sampledLoop } from './sampled/sampled-loop'
import { diesOut } from './stability'
import type { Controller, Gains, LoopModel, Readings, ResponseInput } from './types'

/**
 * The loop closed at given gains, whatever is in it: what every reading is taken from. A dead time, a sampled controller and a limit on its output each
 * change how these are found, not what they mean.
 */
export interface ClosedLoop {
  /** The continuous loop in rational form; see `LoopFunctions.deadTime`. */
  functions: LoopFunctions
  /** All roots, or with dead time those near the origin; of a sampled loop as ln(z)/period. */
  poles: Complex[]
  stable: boolean
  frequencyFigures(): FrequencyFigures
  /** L and T point by point, where they are no ratio of polynomials in s. */
  pointwise?(): PointwiseLoop
  /** rad/s: half the sampling rate of a sampled loop. */
  highestFrequency?: number
  /** What r - y tends to for a unit step (1), ramp (2) or parabola (3); null where it grows. */
  stationaryError(integrators: 1 | 2 | 3): number | null
  /** Output and controller output after a unit input. */
  respondTo(input: ResponseInput, amplitude: number): LoopResponse
}

export type FrequencyFigures = Margins & Pick<Readings, 'sensitivityPeak' | 'bandwidth'>

/**
 * @param work what simulations of this loop may take of it, all together
 * @throws InvalidInputError where the gains are not those of the form
 * @throws NoAnswerError for an algebraic loop
 * @throws TooMuchWorkError, from its responses, where following them to the end would take more than `work`
 */
export function closeLoop(model: LoopModel, controller: Controller, gains: Gains, work: Work = fullWork()): ClosedLoop {
  try {
    return close(model, controller, gains, work)
  }
  catch (error) {
    // The numerics refuse what overflowed on the way to them.
    if (error instanceof RangeError) throw new NoAnswerError('the numbers of this loop are too large or too small to compute with: choose units nearer to its size')
    throw error
  }
}

function close(model: LoopModel, controller: Controller, gains: Gains, work: Work): ClosedLoop {
  const functions = loopFunctions(model, controller, gains)
  if (model.sampling !== undefined) return sampledLoop(model, controller, gains, functions, model.sampling, work)
  const loop = functions.deadTime > 0 ? delayedLoop(functions, work) : rationalLoop(functions)
  const { actuatorLimit } = model
  if (actuatorLimit === undefined) return loop
  return { ...loop, respondTo: (input, amplitude) => limitedResponse(loop, input, amplitude, actuatorLimit, work) }
}

/** The closed loop of a continuous controller without dead time and limit. */
export function rationalLoop(functions: LoopFunctions): ClosedLoop {
  const poles = roots(functions.characteristic)
  const stable = poles.every(diesOut)
  return {
    functions,
    poles,
    stable,
    frequencyFigures: () => ({
      ...margins(functions.loop, stable), sensitivityPeak: sensitivityPeak(functions.loop, poles), bandwidth: stable ? bandwidth(functions.reference) : null,
    }),
    stationaryError: integrators => stationaryError(functions.error, integrators),
    respondTo: input => respondTo(input, functions, poles),
  }
}
