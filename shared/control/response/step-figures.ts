import { firstReaching, highest, lastOutside, type Trajectory } from './trajectory'

/** Figures of a step response; null where one does not exist. */
export interface StepFigures {
  finalValue: number | null
  overshootPercent: number | null
  peakTime: number | null
  riseTime: number | null
  settlingTime: number | null
}

/** Below this share of the final value an overshoot is rounding. */
const noOvershoot = 1e-12

/**
 * Overshoot (percent, in the direction of the final value), peak time, 10 to 90 % rise time (first instants) and settling time (last instant
 * outside the band) of a step response, each refined on the exact expression between the instants of a walk that resolves every mode.
 * Figures relative to the final value do not exist where that is 0, and none exists where the response has no limit.
 * @param bandPercent settling band, percent of the final value
 */
export function stepFigures(y: Trajectory, bandPercent: number): StepFigures {
  const none = { finalValue: null, overshootPercent: null, peakTime: null, riseTime: null, settlingTime: null }
  if (!y.decays || y.remains.length > 1) return none
  const finalValue = y.remains[0]! + 0
  const size = Math.abs(finalValue)
  if (size === 0) return { ...none, finalValue }
  const direction = finalValue > 0 ? 1 : -1
  const peak = highest(y, direction, noOvershoot * size)
  const from = firstReaching(y, direction, -0.9 * size)
  const to = firstReaching(y, direction, -0.1 * size)
  return {
    finalValue,
    overshootPercent: peak === null ? 0 : 100 * peak.value / size,
    peakTime: peak === null ? null : peak.time,
    riseTime: from === null || to === null ? null : to - from,
    settlingTime: lastOutside(y, size * bandPercent / 100),
  }
}
