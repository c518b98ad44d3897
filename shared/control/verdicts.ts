import type { Complex } from '../numerics/complex'
import { dampingRatioOf } from './design-point'
import type { ReadingName, Readings, Requirement, Verdict } from './types'

/** Readings of which null in a stable loop means "without limit": no gain, delay or frequency is large enough to reach the border. */
const unlimited: readonly ReadingName[] = ['gainMarginDb', 'phaseMarginDeg', 'delayMargin', 'bandwidth']

/** Readings that mean something in a stable loop only: a margin tells how far stability is, not whether it is there. */
const ofStableLoops: readonly ReadingName[] = [...unlimited, 'sensitivityPeak']
/** Signed readings whose limits mean their size: an error either way, a gain margin upward or downward. */
const limitedInSize: readonly ReadingName[] = ['steadyStateErrorStep', 'steadyStateErrorRamp', 'gainMarginDb']

/**
 * Each requirement with the figure found and whether it is met (limits included). No margin, bandwidth or sensitivity peak of an unstable loop meets
 * anything; a limit on a steady-state error or a gain margin holds for its size, whichever its sign.
 *
 * A figure that does not exist (null) meets nothing, with one exception: a stable loop whose margin or bandwidth has no limit at all meets
 * every "at least". The reading `dampingRatio` is that of the least damped closed-loop pole, whichever it is: a well-placed design pair does
 * not hide a resonance beside it, and the whole set of poles lies inside the ray when the requirement holds.
 */
export function judge(requirements: readonly Requirement[], readings: Readings, closedLoopPoles: readonly Complex[], stable: boolean): Verdict[] {
  return requirements.map(({ reading, limit, value }) => {
    const actual = reading === 'dampingRatio' ? leastDamping(closedLoopPoles) : readings[reading]
    return { reading, limit, value, actual, met: isMet({ reading, limit, value }, actual, stable) }
  })
}

function isMet({ reading, limit, value }: Requirement, actual: number | null, stable: boolean): boolean {
  if (!stable && ofStableLoops.includes(reading)) return false
  if (actual === null) return limit === 'at-least' && unlimited.includes(reading)
  const figure = limitedInSize.includes(reading) ? Math.abs(actual) : actual
  return limit === 'at-most' ? figure <= value : figure >= value
}

/** The smallest damping ratio among the poles; null where there are none. */
function leastDamping(poles: readonly Complex[]): number | null {
  return poles.length === 0 ? null : Math.min(...poles.map(dampingRatioOf))
}

/**
 * By how much a requirement is missed, as a share of its limit or of the reading, whichever is larger: 0 where it is met, 1 where there is no figure or
 * the limit is 0, at most 2.
 */
export function shortfall({ reading, value, actual, met }: Verdict): number {
  if (met) return 0
  if (actual === null) return 1
  const figure = limitedInSize.includes(reading) ? Math.abs(actual) : actual
  const size = Math.max(Math.abs(value), Math.abs(figure))
  return size === 0 ? 1 : Math.abs(figure - value) / size
}
