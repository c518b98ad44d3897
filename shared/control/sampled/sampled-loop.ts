import { abs } from '../../numerics/complex'
import { roots } from '../../numerics/roots'
import type { ClosedLoop } from '../closed-loop'
import type { LoopFunctions } from '../controller'
import { delayedRemains, delayedStationaryError } from '../delay/limits-at-rest'
import { NoAnswerError } from '../errors'
import { figuresAlongGrid } from '../frequency/along-grid'
import type { Controller, Gains, LoopModel, Sampling } from '../types'
import type { Work } from '../response/work'
import { heldPlant } from './held-plant'
import { sampledController } from './sampled-controller'
import { sampledFrequency } from './sampled-frequency'
import { sampledResponse } from './sampled-response'
import { sampledRoots } from './sampled-roots'

/**
 * A loop whose controller runs at samples, its output held between: the exact hold-equivalent of plant and sensor, with dead time and computing delay.
 *
 * What it tends to in the end is what the continuous loop tends to, since hold and controller keep their gain at rest and the gain of their integrators.
 */
export function sampledLoop(model: LoopModel, controller: Controller, gains: Gains, functions: LoopFunctions, sampling: Sampling, work: Work): ClosedLoop {
  const { period } = sampling
  refuseNeedlessSampling(functions, period)
  const held = heldPlant(model, sampling)
  const law = sampledController(controller, gains, period)
  const { poles, stable } = sampledRoots(held, law, period)
  const pointwise = () => sampledFrequency(held, law, functions, poles, period)
  return {
    functions,
    poles,
    stable,
    pointwise,
    highestFrequency: Math.PI / period,
    frequencyFigures: () => figuresAlongGrid(pointwise(), stable),
    stationaryError: integrators => delayedStationaryError(functions, integrators),
    respondTo(input, amplitude) {
      const limit = model.actuatorLimit === undefined ? Infinity : model.actuatorLimit / Math.abs(amplitude)
      return sampledResponse({ held, controller: law, period, input, limit, work }, stable ? delayedRemains(functions, input) : null, poles)
    },
  }
}

/** Rounding would have more to say than the sampling where all that moves is this slow against the period. */
const needless = 1e-6

function refuseNeedlessSampling({ characteristic }: LoopFunctions, period: number): void {
  const fastest = Math.max(0, ...roots(characteristic).map(abs))
  if (fastest > 0 && fastest * period < needless) {
    throw new NoAnswerError('the sample period is so short against the loop that sampling makes no difference: leave it out', 'loop.samplePeriod')
  }
}
