import type { FrequencyResponse } from '#shared/control/types'
import { formatFixed, gap } from '~/utils/bench/format'
import { curvePath, xOf, yOf, type Panel } from '~/utils/response/draw'
import { ticksWithin, type Range } from '~/utils/response/scale'
import { boxesOfDimension, type Dimension } from './dimension'
import { boxOf, placesAlongCurve, placeWords, type Box, type WordsPlace } from './place-words'
import { readAt, type FrequencyFigures } from './read-at'
import { formatDecade, wholeDecades } from './scale'

/** `loop`: |L| and its phase with the margins; `sensitivity`: |S| and |T|. */
export type PaneName = 'loop' | 'sensitivity'

/** One drawing of the frequency view, in pixels; its panel counts decades along and dB up. */
export interface Pane {
  name: PaneName
  title: string
  panel: Panel
  levels: { y: number, left: string, right: string | null, critical: boolean }[]
  decades: { x: number, text: string | null, anchor: 'middle' | 'end' }[]
  curves: PaneCurve[]
  dimensions: Dimension[]
  /** Where the closed loop ceases to follow. */
  bandwidth: { x: number, y: number, text: string, words: WordsPlace, value: number } | null
}

export interface PaneCurve {
  name: string
  path: string
  dashed: boolean
  /** Null where the curve is out of sight. */
  label: WordsPlace | null
  heightOf: (figures: FrequencyFigures) => number
}

/** A curve before it is drawn. */
export interface CurveSketch {
  name: string
  dashed: boolean
  valueOf: (figures: FrequencyFigures) => number
  /** The share of the width at which its name would like to stand. */
  prefer: number
}

/** Pixels that a decade needs for its figure. */
const decadeRoom = 44
/** So close to the right end the figure of a decade carries the unit. */
const unitRoom = 40

/** Both curves of a pane, each with its name beside it, clear of the other, of the line of 0 dB and of what is drawn already. */
export function drawCurves(
  response: FrequencyResponse, panel: Panel, sketches: readonly CurveSketch[], dimensions: readonly (Dimension | null)[], boxes: readonly Box[] = [],
): PaneCurve[] {
  const { frequency, magnitudeDb, phaseDeg, sensitivityDb, complementaryDb } = response
  const decades = frequency.map(Math.log10)
  const taken = [...boxes, ...dimensions.flatMap(dimension => dimension ? boxesOfDimension(dimension) : [])]
  return sketches.map(({ name, dashed, valueOf, prefer }) => {
    const values = frequency.map((_, i) => valueOf({
      magnitudeDb: magnitudeDb[i]!, phaseDeg: phaseDeg[i]!, sensitivityDb: sensitivityDb[i]!, complementaryDb: complementaryDb[i]!,
    }))
    const others = sketches.filter(other => other.name !== name).map(other => valueAlong(response, other.valueOf))
    const places = placesAlongCurve(panel, valueAlong(response, valueOf), prefer)
    const label = places.length === 0 ? null : placeWords(name, places, { panel, curves: [...others, () => 0], boxes: taken })
    if (label) taken.push(boxOf(label, name))
    return { name, dashed, label, path: curvePath(panel, decades, values), heightOf: figures => yOf(panel, valueOf(figures)) }
  })
}

/** The value of a curve at a share of the width of its panel. */
export function valueAlong(response: FrequencyResponse, valueOf: (figures: FrequencyFigures) => number): (share: number) => number {
  const [from, to] = [response.frequency[0]!, response.frequency.at(-1)!]
  return share => valueOf(readAt(response, Math.min(to, Math.max(from, from * (to / from) ** share)))!)
}

/** A line for every step of dB. */
export function levelsOf(panel: Panel, step: number, right: ((value: number) => string) | null): Pane['levels'] {
  const { min, max } = panel.value
  return ticksWithin(panel.value, (max - min) / step).map(value => ({
    y: yOf(panel, value), left: `${formatFixed(value, 0)}${value === 0 ? `${gap}dB` : ''}`, right: right && right(value), critical: value === 0,
  }))
}

/** Pixels of a letter in the figures of the axes, on average. */
const letterWidth = 6.5

/** A line for every decade; figures where they have room, the unit with the last one. */
export function decadesOf(panel: Panel): Pane['decades'] {
  const named = wholeDecades(panel.along, (panel.right - panel.left) / decadeRoom)
  const decades = wholeDecades(panel.along, Infinity).map((exponent): Pane['decades'][number] => {
    const x = xOf(panel, exponent)
    const atEnd = panel.right - x < unitRoom
    const figure = `${formatDecade(exponent)}${exponent === named.at(-1) ? `${gap}rad/s` : ''}`
    return { x, text: named.includes(exponent) ? figure : null, anchor: atEnd ? 'end' : 'middle' }
  })
  return withoutTheCovered(decades)
}

/** The last figure carries the unit and may reach over the one before, which then gives way. */
function withoutTheCovered(decades: Pane['decades']): Pane['decades'] {
  const last = decades.findLast(({ text }) => text !== null)
  if (!last) return decades
  const widthOf = ({ text }: Pane['decades'][number]) => (text?.length ?? 0) * letterWidth
  const begins = last.x - widthOf(last) * (last.anchor === 'end' ? 1 : 0.5)
  return decades.map(decade => decade !== last && decade.x + widthOf(decade) / 2 > begins - letterWidth ? { ...decade, text: null } : decade)
}

/** The frequency at a place across a panel, kept within it. */
export function frequencyAt({ left, right, along }: Panel, x: number): number {
  const share = Math.min(1, Math.max(0, (x - left) / (right - left)))
  return 10 ** (along.min + share * (along.max - along.min))
}

export function decadesSpanned({ frequency }: FrequencyResponse): Range {
  return { min: Math.log10(frequency[0]!), max: Math.log10(frequency.at(-1)!) }
}
