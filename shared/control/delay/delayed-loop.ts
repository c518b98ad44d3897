import { abs } from '../../numerics/complex'
import * as polynomial from '../../numerics/polynomial'
import type { ClosedLoop } from '../closed-loop'
import type { LoopFunctions } from '../controller'
import { figuresAlongGrid } from '../frequency/along-grid'
import { stationaryError } from '../response/steady-state'
import { delayedFrequency } from './delayed-frequency'
import { delayedResponse } from './delayed-response'
import { delayedRoots, delayedStable } from './delayed-roots'
import { timesDelaySeries } from './quasi-polynomial'

/** Powers of s at the origin that limits can feel. */
const seriesDegree = 8

/** A loop with dead time: roots of the quasi-polynomial, responses by true delay, margins bracketed on the imaginary axis. */
export function delayedLoop(functions: LoopFunctions): ClosedLoop {
  const { loop, reference, deadTime } = functions
  const found = delayedRoots({ ...loop, deadTime })
  const stable = delayedStable(found)
  const { poles } = found
  return {
    functions,
    poles,
    stable,
    frequencyFigures: () => figuresAlongGrid(delayedFrequency(functions, poles), stable),
    stationaryError(integrators) {
      const series = (p: number[]) => timesDelaySeries(p, deadTime, seriesDegree)
      const rest = polynomial.subtract(loop.numerator, reference.numerator)
      return stationaryError({ numerator: polynomial.add(loop.denominator, series(rest)), denominator: polynomial.add(loop.denominator, series(loop.numerator)) }, integrators)
    },
    respondTo: input => delayedResponse(functions, input, poles, stable, fastest(functions, poles)),
  }
}

/** rad/s up to which the loop acts on what comes back: the speed of its roots, but for the chain that the delay brings. */
function fastest({ deadTime }: LoopFunctions, poles: ClosedLoop['poles']): number {
  return poles.reduce((most, pole) => pole.re > -3 / deadTime && abs(pole) < 8 / deadTime ? Math.max(most, abs(pole)) : most, 0)
}
