import type { Gains } from '#shared/control/types'

/** The strip shows the gain from one part in this many to as many times. */
export const reach = 100

/** Where a factor on the gain stands along the strip, from 0 to 1; beyond its ends it stands at the end. */
export function shareOf(factor: number): number {
  return Math.min(1, Math.max(0, 0.5 + Math.log(factor) / Math.log(reach) / 2))
}

/** The factor at a place along the strip. */
export function factorAt(share: number): number {
  return reach ** (2 * Math.min(1, Math.max(0, share)) - 1)
}

/** The factor that leads from one set of gains to another, by the gain that is largest; null where they are not of one form or one is zero. */
export function factorBetween(from: Gains, to: Gains): number | null {
  const names = Object.keys(from).filter(name => name !== 'zero' && name !== 'pole')
  const [start, end] = [from, to] as unknown as Record<string, number>[]
  const largest = names.reduce((best, name) => Math.abs(start![name]!) > Math.abs(start![best]!) ? name : best, names[0]!)
  const factor = end![largest]! / start![largest]!
  return Number.isFinite(factor) && factor > 0 ? factor : null
}
