import { niceStep } from '~/utils/nice-step'

export interface Range {
  min: number
  max: number
}

const room = { below: 0.04, above: 0.08 }
/** A range is kept while its content fills at least this part of it. */
const leastFilled = 0.5

/** Round values inside a range, about `count` of them. */
export function ticksWithin({ min, max }: Range, count: number): number[] {
  const step = niceStep((max - min) / count)
  const first = Math.ceil(min / step - 1e-9)
  const last = Math.floor(max / step + 1e-9)
  return Array.from({ length: last - first + 1 }, (_, index) => Number(((first + index) * step).toPrecision(12)))
}

/** The range to draw: the one before for as long as the content fits and fills it, so that the axis stands still under the hand. */
export function calmRange(before: Range | null, content: Range): Range {
  const span = content.max - content.min
  if (before && content.min >= before.min && content.max <= before.max && span >= leastFilled * (before.max - before.min)) return before
  const size = span > 0 ? span : Math.abs(content.max) || 1
  const wide = { min: content.min - room.below * size, max: content.max + room.above * size }
  const step = niceStep((wide.max - wide.min) / 20)
  const round = (value: number) => Number(value.toPrecision(12))
  return { min: round(Math.floor(wide.min / step) * step), max: round(Math.ceil(wide.max / step) * step) }
}

/** The least and the largest of several lists, with values that must be in sight. */
export function extentOf(lists: readonly (readonly number[])[], always: readonly number[] = []): Range {
  let min = Math.min(...always, Infinity)
  let max = Math.max(...always, -Infinity)
  for (const list of lists) {
    for (const value of list) {
      if (value < min) min = value
      if (value > max) max = value
    }
  }
  return min <= max ? { min, max } : { min: 0, max: 1 }
}
