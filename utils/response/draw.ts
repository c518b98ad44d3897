import type { Range } from './scale'

export interface Panel {
  left: number
  right: number
  top: number
  bottom: number
  /** Seconds, or decades of frequency. */
  along: Range
  value: Range
}

export function xOf({ left, right, along }: Panel, at: number): number {
  return left + (at - along.min) / (along.max - along.min) * (right - left)
}

export function yOf({ top, bottom, value }: Panel, at: number): number {
  return bottom - (at - value.min) / (value.max - value.min) * (bottom - top)
}

/** The path of a curve in an SVG; points far outside the panel are drawn at its rim, where they are clipped. */
export function curvePath(panel: Panel, along: readonly number[], values: readonly number[]): string {
  const reach = panel.bottom - panel.top
  return along.map((at, index) => {
    const y = Math.max(panel.top - reach, Math.min(panel.bottom + reach, yOf(panel, values[index]!)))
    return `${index === 0 ? 'M' : 'L'}${xOf(panel, at).toFixed(1)} ${y.toFixed(1)}`
  }).join('')
}

/** The value of a sampled curve at a time between its samples. */
export function valueAt(time: readonly number[], values: readonly number[], at: number): number | null {
  const last = time.length - 1
  if (last < 1 || at < time[0]! || at > time[last]!) return null
  const place = (at - time[0]!) / (time[last]! - time[0]!) * last
  const index = Math.min(Math.floor(place), last - 1)
  return values[index]! + (place - index) * (values[index + 1]! - values[index]!)
}
