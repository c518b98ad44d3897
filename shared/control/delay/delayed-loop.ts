import { abs } from '../../numerics/complex'
import { roots } from '../../numerics/roots'
import type { ClosedLoop } from '../closed-loop'
import type { LoopFunctions } from '../controller'
import { NoAnswerError } from '../errors'
import { figuresAlongGrid } from '../frequency/along-grid'
import type { Work } from '../response/work'
import { delayedFrequency } from './delayed-frequency'
import { delayedResponse } from './delayed-response'
import { delayedRoots, delayedStable } from './delayed-roots'
import { delayedStationaryError } from './limits-at-rest'

/** A loop with dead time: roots of the quasi-polynomial, responses by true delay, margins bracketed on the imaginary axis. */
export function delayedLoop(functions: LoopFunctions, work: Work): ClosedLoop {
  const { loop, deadTime } = functions
  refuseEndlessDelay(functions)
  const found = delayedRoots({ ...loop, deadTime })
  const stable = delayedStable(found)
  const { poles } = found
  const pointwise = () => delayedFrequency(functions, poles)
  return {
    functions,
    poles,
    stable,
    pointwise,
    frequencyFigures: () => figuresAlongGrid(pointwise(), stable),
    stationaryError: integrators => delayedStationaryError(functions, integrators),
    respondTo: input => delayedResponse(functions, input, poles, stable, actingSpeed(functions, poles), work),
  }
}

/** Dead time in time constants of the slowest root of the open loop up to which there is a loop worth computing. */
const longest = 1e4

function refuseEndlessDelay({ loop, deadTime }: LoopFunctions): void {
  const sizes = roots(loop.denominator).map(abs).filter(size => size > 0)
  if (sizes.length > 0 && Math.min(...sizes) * deadTime > longest) {
    throw new NoAnswerError('the dead time is so long against the rest of the loop that nothing else in it can be told', 'loop.deadTime')
  }
}

/** rad/s up to which the loop acts on what comes back: the speed of its roots, but for the chain that the delay brings. */
export function actingSpeed({ deadTime }: LoopFunctions, poles: ClosedLoop['poles']): number {
  return poles.reduce((most, pole) => pole.re > -3 / deadTime && abs(pole) < 8 / deadTime ? Math.max(most, abs(pole)) : most, 0)
}
