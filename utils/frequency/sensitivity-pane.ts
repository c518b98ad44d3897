import { formatFigure } from '~/utils/bench/format'
import { xOf, yOf, type Panel } from '~/utils/response/draw'
import type { FrequencyAnswer } from './answer'
import { beside, boxesOfDimension, drawDimension, type Dimension } from './dimension'
import { decadesOf, drawCurves, levelsOf, valueAlong, type CurveSketch, type Pane } from './pane'
import { boxOf, placeWords, type Taken } from './place-words'
import { readAt } from './read-at'
import { sensitivityRange, sensitivityStep } from './scale'

const sketches: CurveSketch[] = [
  { name: 'S', dashed: false, valueOf: ({ sensitivityDb }) => sensitivityDb, prefer: 0.2 },
  { name: 'T', dashed: true, valueOf: ({ complementaryDb }) => complementaryDb, prefer: 0.7 },
]

/** |S| and |T| over frequency, with the peak of |S| and the bandwidth. */
export function drawSensitivityPane(answer: FrequencyAnswer, box: Omit<Panel, 'value'>): Pane {
  const { response } = answer
  const panel: Panel = { ...box, value: sensitivityRange(response) }
  const taken: Taken = { panel, curves: sketches.map(({ valueOf }) => valueAlong(response, valueOf)), boxes: [] }
  const peak = sensitivityPeak(answer, taken)
  const bandwidth = bandwidthOf(answer, { ...taken, boxes: peak ? boxesOfDimension(peak) : [] })
  const { bottom } = panel
  const ofBandwidth = bandwidth
    ? [{ left: bandwidth.x - 2, right: bandwidth.x + 2, top: bandwidth.y, bottom }, boxOf(bandwidth.words, bandwidth.text)]
    : []
  return {
    name: 'sensitivity',
    title: 'sensitivity S, complementary sensitivity T',
    panel,
    levels: levelsOf(panel, sensitivityStep, null),
    decades: decadesOf(panel),
    curves: drawCurves(response, panel, sketches, [peak], ofBandwidth),
    dimensions: peak ? [peak] : [],
    bandwidth,
  }
}

/** At the frequency of the peak, from 0 dB to |S|. */
function sensitivityPeak({ response, readings }: FrequencyAnswer, taken: Taken): Dimension | null {
  const [frequency, value] = [response.sensitivityPeakFrequency, readings.sensitivityPeak]
  if (frequency === null || value === null || value <= 1) return null
  return drawDimension({ reading: 'sensitivityPeak', value, text: `peak ${formatFigure(value, 3)}` }, frequency, [0, 20 * Math.log10(value)], 'start', taken)
}

/** From |T| down to the axis; its words to the left, where |S| and |T| leave room, or wherever they cover less. */
function bandwidthOf({ response, readings }: FrequencyAnswer, taken: Taken): Pane['bandwidth'] {
  const value = readings.bandwidth
  const figures = value === null ? null : readAt(response, value)
  if (value === null || !figures) return null
  const { panel } = taken
  const x = xOf(panel, Math.log10(value))
  const y = Math.min(panel.bottom, Math.max(panel.top, yOf(panel, figures.complementaryDb)))
  const text = `bandwidth ${formatFigure(value, 3)}`
  const heights = [panel.bottom - 7, (y + panel.bottom) / 2, y + 16]
  return { x, y, text, value, words: placeWords(text, heights.flatMap(height => beside(x, height, 'end')), taken) }
}
