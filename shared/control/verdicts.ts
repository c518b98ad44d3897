import type { Complex } from '../numerics/complex'
import { dampingRatioOf } from './design-point'
import type { ReadingName, Readings, Requirement, Verdict } from './types'

/** Readings of which null in a stable loop means "without limit": no gain, delay or frequency is large enough to reach the border. */
const unlimited: readonly ReadingName[] = ['gainMarginDb', 'phaseMarginDeg', 'delayMargin', 'bandwidth']

/**
 * Each requirement with the figure found and whether it is met (limits included).
 *
 * A figure that does not exist (null) meets nothing, with one exception: a stable loop whose margin or bandwidth has no limit at all meets
 * every "at least". The reading `dampingRatio` is that of the least damped closed-loop pole, whichever it is: a well-placed design pair does
 * not hide a resonance beside it, and the whole set of poles lies inside the ray when the requirement holds.
 */
export function judge(requirements: readonly Requirement[], readings: Readings, closedLoopPoles: readonly Complex[], stable: boolean): Verdict[] {
  return requirements.map(({ reading, limit, value }) => {
    const actual = reading === 'dampingRatio' ? leastDamping(closedLoopPoles) : readings[reading]
    const met = actual === null
      ? stable && limit === 'at-least' && unlimited.includes(reading)
      : limit === 'at-most' ? actual <= value : actual >= value
    return { reading, limit, value, actual, met }
  })
}

/** The smallest damping ratio among the poles; null where there are none. */
export function leastDamping(poles: readonly Complex[]): number | null {
  return poles.length === 0 ? null : Math.min(...poles.map(dampingRatioOf))
}
