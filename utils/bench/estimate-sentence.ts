import type { DesignSolution } from '#shared/control/types'
import { formatFixed } from './format'

/** Where an estimate is further than this from the whole loop, it is said. */
const worthSaying = { points: 1, percent: 5 }

/** One plain sentence on how far the second-order rules of thumb are from the whole loop; null for a design without step figures. */
export function estimateSentence({ estimate, readings, stable }: Pick<DesignSolution, 'estimate' | 'readings' | 'stable'>): string | null {
  if (!stable || readings.overshootPercent === null || estimate.overshootPercent === null) return null
  const points = readings.overshootPercent - estimate.overshootPercent
  const parts: string[] = []
  if (Math.abs(points) > worthSaying.points) {
    parts.push(`the overshoot is ${formatFixed(Math.abs(points), 1)} points ${points > 0 ? 'above' : 'below'} the second-order estimate`)
  }
  const slower = percentBeyond(readings.settlingTime, estimate.settlingTime)
  if (slower !== null && Math.abs(slower) > worthSaying.percent) {
    parts.push(settlingClause(slower))
  }
  if (parts.length === 0) return 'The second-order estimate is close here: the whole loop differs by less than a point of overshoot and 5 % of settling time.'
  const [first, ...rest] = parts.join(', and ')
  return `${first!.toUpperCase()}${rest.join('')}.`
}

function percentBeyond(actual: number | null, estimate: number | null): number | null {
  return actual === null || estimate === null || estimate === 0 ? null : 100 * (actual / estimate - 1)
}

function settlingClause(percent: number): string {
  if (percent > 100) return `settling takes ${formatFixed(1 + percent / 100, 1)} times the rule of thumb`
  return `the loop settles ${formatFixed(Math.abs(percent), 0)} % ${percent > 0 ? 'later' : 'sooner'} than the rule of thumb`
}
