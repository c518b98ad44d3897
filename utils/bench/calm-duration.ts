import type { DesignSolution } from '#shared/control/types'

/** A stretch of time to look at, and the time scale of the design that it was chosen for. */
export interface TimeFrame {
  /** Seconds to ask for; absent: the server chooses, because the old frame no longer suits. */
  duration?: number
  scale: number
  stable: boolean
}

/** A frame is kept while the time scale stays within these factors of the one it was chosen for. */
const kept = { least: 0.4, most: 1.3 }

/** The frame for the next question: the present one for as long as it suits, so that the time axis stands still under the hand. */
export function calmDuration(frame: TimeFrame | null, solution: DesignSolution): TimeFrame {
  const scale = timeScale(solution)
  const { stable, response } = solution
  if (frame?.duration === undefined) return { duration: response.time.at(-1), scale, stable }
  const ratio = scale / frame.scale
  return stable === frame.stable && ratio >= kept.least && ratio <= kept.most ? frame : { scale, stable }
}

/** Settling time of a stable design; for others the time in which the fastest growth multiplies by e. */
function timeScale({ readings, closedLoopPoles }: DesignSolution): number {
  if (readings.settlingTime) return readings.settlingTime
  const rate = Math.max(...closedLoopPoles.map(pole => Math.abs(pole.re)), 0)
  return rate > 0 ? 1 / rate : 1
}
