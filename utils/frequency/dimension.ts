import type { ReadingName } from '#shared/control/types'
import { xOf, yOf } from '~/utils/response/draw'
import { boxOf, placeWords, type Box, type Taken, type WordsPlace } from './place-words'

/** A distance drawn as on a technical drawing, from the line it is counted from to the curve; in pixels. */
export interface Dimension {
  reading: ReadingName
  x: number
  upper: number
  lower: number
  /** Too short for arrows inside: they stand outside and point inward. */
  short: boolean
  text: string
  words: WordsPlace
  value: number
}

/** Pixels: below `short` arrows and words stand outside; `tail` is as long as an outer arrow. */
const lengths = { short: 20, tail: 13, gap: 8 }

/**
 * The dimension line at a frequency, between two heights in dB; null where it is not in sight.
 * @param prefer the side of the line on which the words stand if they can
 */
export function drawDimension(
  { reading, value, text }: Pick<Dimension, 'reading' | 'value' | 'text'>, frequency: number, [from, to]: readonly [number, number],
  prefer: WordsPlace['anchor'], taken: Taken,
): Dimension | null {
  const { panel } = taken
  const x = xOf(panel, Math.log10(frequency))
  if (!(x >= panel.left && x <= panel.right) || ![from, to].every(height => height >= panel.value.min && height <= panel.value.max)) return null
  const [upper, lower] = [Math.max(from, to), Math.min(from, to)].map(height => yOf(panel, height)) as [number, number]
  const short = lower - upper < lengths.short
  const heights = short ? (to >= from ? [upper - 6, lower + 14] : [lower + 14, upper - 6]) : [(upper + lower) / 2 + 4, lower - 1, upper + 11]
  const words = placeWords(text, heights.flatMap(y => beside(x, y, prefer)), taken)
  return { reading, value, text, x, upper, lower, short, words }
}

/** What a dimension takes up: its line and its words. */
export function boxesOfDimension({ x, upper, lower, short, text, words }: Dimension): Box[] {
  const tail = short ? lengths.tail : 0
  return [{ left: x - 5, right: x + 5, top: upper - tail, bottom: lower + tail }, boxOf(words, text)]
}

/** To the preferred side of a vertical line, then to the other. */
export function beside(x: number, y: number, prefer: WordsPlace['anchor']): WordsPlace[] {
  const places: WordsPlace[] = [{ x: x + lengths.gap, y, anchor: 'start' }, { x: x - lengths.gap, y, anchor: 'end' }]
  return prefer === 'start' ? places : places.reverse()
}
