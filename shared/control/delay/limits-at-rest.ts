import * as polynomial from '../../numerics/polynomial'
import type { LoopFunctions } from '../controller'
import { remainingPolynomial } from '../response/modal-sum'
import { stationaryError } from '../response/steady-state'
import type { ResponseInput } from '../types'
import { timesDelaySeries } from './quasi-polynomial'

/** Powers of s at the origin that limits can feel. */
const seriesDegree = 8

/** What r - y of a stable loop with dead time tends to: only powers of s near 0 matter, where the delay is its power series. */
export function delayedStationaryError({ loop, reference, deadTime }: LoopFunctions, integrators: 1 | 2 | 3): number | null {
  const rest = polynomial.subtract(loop.numerator, reference.numerator)
  const series = (p: number[]) => timesDelaySeries(p, deadTime, seriesDegree)
  return stationaryError({ numerator: polynomial.add(loop.denominator, series(rest)), denominator: polynomial.add(loop.denominator, series(loop.numerator)) }, integrators)
}

/** What output and controller output of a stable loop with dead time tend to after a unit input, ascending powers of t. */
export function delayedRemains({ loop, reference, effort, disturbance, deadTime }: LoopFunctions, input: ResponseInput): { output: number[], effort: number[] } {
  const series = (p: number[]) => timesDelaySeries(p, deadTime, seriesDegree)
  const denominator = polynomial.add(loop.denominator, series(loop.numerator))
  const remains = (numerator: number[]) => remainingPolynomial({ numerator, denominator, poles: [], integrators: input === 'reference-ramp' ? 2 : 1 })
  return input === 'disturbance-step'
    ? { output: remains(disturbance.numerator), effort: remains(series(polynomial.scale(loop.numerator, -1))) }
    : { output: remains(series(reference.numerator)), effort: remains(effort.numerator) }
}
