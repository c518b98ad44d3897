import type { Gains } from './types'

/** The gains with the overall gain multiplied; zero and pole of a lead or lag are places and stay. */
export function scaleGains(gains: Gains, factor: number): Gains {
  return Object.fromEntries(Object.entries(gains).map(([name, value]) => [name, name === 'zero' || name === 'pole' ? value : value as number * factor])) as unknown as Gains
}
