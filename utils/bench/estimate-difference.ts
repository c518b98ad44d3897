import { worthSaying } from '#shared/control/estimate'
import { formatFixed, gap } from './format'
import type { ReadingDescription } from './readings'

/** How far an estimate is from the true figure, in short words (pt: percentage points); null where that is within a point of overshoot or 5 % of a time. */
export function estimateDifference({ unit }: Pick<ReadingDescription, 'unit'>, value: number | null, estimate: number | null): string | null {
  if (value === null || estimate === null) return null
  if (unit === '%') {
    const points = estimate - value
    return Math.abs(points) > worthSaying.points ? `${formatFixed(Math.abs(points), 1)}${gap}pt ${points < 0 ? 'low' : 'high'}` : null
  }
  const percent = 100 * (estimate / value - 1)
  if (!(Math.abs(percent) > worthSaying.percent) || !Number.isFinite(percent)) return null
  return `${formatFixed(Math.abs(percent), 0)}${gap}% ${percent < 0 ? 'short' : 'long'}`
}
