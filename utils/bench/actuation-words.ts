import type { Loop } from '#shared/schemas/loop'
import { formatPlain, gap } from '~/utils/bench/format'

/** Four significant digits tell two times apart and stay readable. */
const digits = 4

/** Seconds in the unit in which they are spoken of: 2 ms, 50 µs, 1.5 s. */
export function formatSpan(seconds: number): string {
  const rounded = Number(seconds.toPrecision(digits))
  const [factor, unit] = rounded >= 1 || rounded < 1e-6 ? [1, 's'] : rounded >= 1e-3 ? [1e3, 'ms'] : [1e6, 'µs']
  return `${formatPlain(rounded * factor, digits)}${gap}${unit}`
}

/** A bound on the size of a signal, which counts both ways. */
export function formatBothWays(limit: number): string {
  return `±${formatPlain(limit, digits)}`
}

/** What stands between controller and plant, in few words; null where they meet at once, without limit and at all times. */
export function actuationSummary({ deadTime, actuatorLimit, samplePeriod, computingDelay }: Loop): string | null {
  const parts = [
    ...(deadTime ? [`dead time ${formatSpan(deadTime)}`] : []),
    ...(actuatorLimit === undefined ? [] : [`limit ${formatPlain(actuatorLimit, digits)}`]),
    ...(samplePeriod === undefined ? [] : [`every ${formatSpan(samplePeriod)}`]),
    ...(computingDelay === 'one-sample' ? ['output one sample later'] : []),
  ]
  return parts.length === 0 ? null : parts.join(', ')
}
