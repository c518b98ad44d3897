import type { ClosedLoop } from './closed-loop'
import type { LoopResponse } from './response/response'
import { stepFigures } from './response/step-figures'
import { largestSize } from './response/trajectory'
import type { Readings } from './types'

export interface ReadingOptions {
  /** Height of the reference step; scales final value, effort and steady-state errors. */
  amplitude: number
  settlingBandPercent: number
}

/**
 * Every reading of the closed loop, by the definitions of `Readings`' fields; null where a figure does not exist. In an unstable loop the figures of
 * the response and the bandwidth do not, while margins and sensitivity peak, which are figures of the loop transfer, do.
 * @param step output and effort after a unit reference step; null where it could not be followed, and its figures do not exist
 */
export function readAll(closed: ClosedLoop, step: LoopResponse | null, options: ReadingOptions): Readings {
  const ofLoop = closed.frequencyFigures()
  if (!closed.stable || step === null) {
    return finiteOrNull({
      finalValue: null, overshootPercent: null, peakTime: null, riseTime: null, settlingTime: null,
      steadyStateErrorStep: null, steadyStateErrorRamp: null, peakEffort: null, ...ofLoop,
    })
  }
  const { amplitude, settlingBandPercent } = options
  const scaled = (value: number | null) => value === null ? null : value * amplitude + 0
  const figures = stepFigures(step.output, settlingBandPercent)
  return finiteOrNull({
    ...figures,
    finalValue: scaled(figures.finalValue),
    steadyStateErrorStep: scaled(closed.stationaryError(1)),
    steadyStateErrorRamp: scaled(closed.stationaryError(2)),
    peakEffort: step.effort.impulsive ? null : Math.min(step.bound ?? Infinity, largestSize(step.effort)) * Math.abs(amplitude),
    ...ofLoop,
  })
}

/** A figure that has left the range of numbers does not exist either. */
function finiteOrNull(readings: Readings): Readings {
  for (const name of Object.keys(readings) as (keyof Readings)[]) {
    if (name !== 'gainMargin' && !Number.isFinite(readings[name])) readings[name] = null
  }
  return readings
}
