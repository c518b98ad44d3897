import type { Gains } from '#shared/control/types'
import type { GainUnits } from '#shared/schemas/design'

export interface NamedGain {
  name: string
  value: number
  /** What it multiplies, in words. */
  meaning: string
  /** Empty where it has none or none is known. */
  unit: string
}

const meanings: Record<string, string> = {
  k: 'overall gain',
  kp: 'proportional gain',
  kd: 'derivative gain',
  ki: 'integral gain',
  kr: 'rate feedback gain',
  zero: 'of the controller',
  pole: 'of the controller',
}

/** The gains in the order in which they are read. */
export function namedGains(gains: Gains, units: GainUnits = {}): NamedGain[] {
  return Object.entries(gains).map(([name, value]) => ({ name, value: value as number, meaning: meanings[name]!, unit: units[name] ?? '' }))
}

/** What a negative gain asks for, in words; null where none is negative. Zero and pole of a lead or lag are places, not gains. */
export function negativeGainSentence(gains: Gains): string | null {
  const negative = namedGains(gains).filter(({ name, value }) => value < 0 && name !== 'zero' && name !== 'pole').map(({ name }) => name)
  if (negative.length === 0) return null
  const [subject, verb] = negative.length === 1 ? [negative[0], 'is'] : [negative.join(' and '), 'are']
  return `${subject} ${verb} negative: this point asks for positive feedback.`
}
