import type { DesignSolution, ReadingName, Requirement } from '#shared/control/types'
import { formatFigure, formatFixed, formatPlain, gap } from './format'

export interface ReadingDescription {
  name: ReadingName
  label: string
  /** Its name in `data-test`. */
  test: string
  unit: string
  /** Decimals for figures of a natural size, else significant digits. */
  decimals?: number
  digits?: number
  /** What it means in a stable loop that there is no figure. */
  none?: string
  /** The sense in which limits of this reading are usually set. */
  usualLimit: Requirement['limit']
  /** A limit that a new requirement begins with. */
  usualValue: number
  estimate?: keyof DesignSolution['estimate']
}

/** The readings in the order in which an engineer asks for them. */
export const readingDescriptions: readonly ReadingDescription[] = [
  { name: 'overshootPercent', label: 'Overshoot', test: 'overshoot', unit: '%', decimals: 2, usualLimit: 'at-most', usualValue: 10, estimate: 'overshootPercent' },
  { name: 'settlingTime', label: 'Settling time', test: 'settling-time', unit: 's', digits: 4, usualLimit: 'at-most', usualValue: 1, estimate: 'settlingTime' },
  { name: 'riseTime', label: 'Rise time', test: 'rise-time', unit: 's', digits: 4, usualLimit: 'at-most', usualValue: 1, estimate: 'riseTime' },
  { name: 'peakTime', label: 'Peak time', test: 'peak-time', unit: 's', digits: 4, usualLimit: 'at-most', usualValue: 1, estimate: 'peakTime' },
  { name: 'phaseMarginDeg', label: 'Phase margin', test: 'phase-margin', unit: '°', decimals: 1, none: 'no limit', usualLimit: 'at-least', usualValue: 50 },
  { name: 'gainMarginDb', label: 'Gain margin', test: 'gain-margin', unit: 'dB', decimals: 1, none: 'no limit', usualLimit: 'at-least', usualValue: 8 },
  { name: 'delayMargin', label: 'Delay margin', test: 'delay-margin', unit: 's', digits: 3, none: 'no limit', usualLimit: 'at-least', usualValue: 0.01 },
  { name: 'sensitivityPeak', label: 'Sensitivity peak', test: 'sensitivity-peak', unit: '', digits: 3, usualLimit: 'at-most', usualValue: 1.6 },
  { name: 'bandwidth', label: 'Bandwidth', test: 'bandwidth', unit: 'rad/s', digits: 3, none: 'no limit', usualLimit: 'at-least', usualValue: 1 },
  { name: 'steadyStateErrorStep', label: 'Step error', test: 'step-error', unit: '', digits: 3, usualLimit: 'at-most', usualValue: 0.05 },
  { name: 'steadyStateErrorRamp', label: 'Ramp error', test: 'ramp-error', unit: 's', digits: 3, none: 'grows', usualLimit: 'at-most', usualValue: 1 },
  { name: 'peakEffort', label: 'Peak effort', test: 'peak-effort', unit: '', digits: 4, none: 'impulse', usualLimit: 'at-most', usualValue: 10 },
  { name: 'dampingRatio', label: 'Least damping', test: 'damping-ratio', unit: '', digits: 3, usualLimit: 'at-least', usualValue: 0.5 },
]

export function describeReading(name: ReadingName): ReadingDescription {
  return readingDescriptions.find(description => description.name === name)!
}

/** A reading with its unit; where there is no figure, what that means, or a dash. */
export function formatReading({ name, unit, decimals, digits, none }: ReadingDescription, value: number | null, stable: boolean): string {
  if (value === null) return stable && none !== undefined ? none : '–'
  // In a stable loop a margin below 0 dB is one on the other side: how far the gain may fall.
  const size = name === 'gainMarginDb' && stable ? Math.abs(value) : value
  const figure = withUnit(decimals === undefined ? formatFigure(size, digits) : formatFixed(size, decimals), unit)
  return size === value ? figure : `${figure} down`
}

/** A limit in short: at most 12 % becomes ≤ 12 %. */
export function formatLimit({ limit, value, reading }: Requirement): string {
  return `${limit === 'at-most' ? '≤' : '≥'}${gap}${withUnit(formatPlain(value), describeReading(reading).unit)}`
}

/** A limit in words. */
export function sayLimit({ limit, value, reading }: Requirement): string {
  return `${limit === 'at-most' ? 'at most' : 'at least'} ${withUnit(formatPlain(value), describeReading(reading).unit)}`
}

function withUnit(figure: string, unit: string): string {
  if (unit === '') return figure
  return unit === '°' ? `${figure}°` : `${figure}${gap}${unit}`
}

/**
 * The damping ratio is a reading only by its verdict: it is that of the least damped root. An unstable loop has no delay that it could bear; the
 * figure of docs/http-contract.md tells by how much it misses one.
 */
export function readingValue(name: ReadingName, { readings, stable }: Pick<DesignSolution, 'readings' | 'stable'>): number | null | undefined {
  if (name === 'dampingRatio') return undefined
  return name === 'delayMargin' && !stable ? null : readings[name]
}
