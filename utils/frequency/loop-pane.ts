import { formatFixed } from '~/utils/bench/format'
import { describeReading, formatReading } from '~/utils/bench/readings'
import type { Panel } from '~/utils/response/draw'
import type { FrequencyAnswer } from './answer'
import { boxesOfDimension, drawDimension, type Dimension } from './dimension'
import { decadesOf, drawCurves, levelsOf, valueAlong, type CurveSketch, type Pane } from './pane'
import type { Taken } from './place-words'
import { readAt } from './read-at'
import { loopScale, loopStep } from './scale'

/** |L| and its phase over frequency, both margins measured from the line that 0 dB and -180 degrees share. */
export function drawLoopPane(answer: FrequencyAnswer, box: Omit<Panel, 'value'>): Pane {
  const { response, readings } = answer
  const { range, degreesPerDb } = loopScale(response, readings.gainMarginDb)
  const panel: Panel = { ...box, value: range }
  const height = (degrees: number) => (degrees + 180) / degreesPerDb
  const sketches: CurveSketch[] = [
    { name: 'L', dashed: false, valueOf: ({ magnitudeDb }) => magnitudeDb, prefer: 0.1 },
    { name: 'phase', dashed: true, valueOf: ({ phaseDeg }) => height(phaseDeg), prefer: 0.1 },
  ]
  const taken: Taken = { panel, curves: sketches.map(({ valueOf }) => valueAlong(response, valueOf)), boxes: [] }
  const phase = phaseMargin(answer, height, taken)
  const gain = gainMargin(answer, { ...taken, boxes: phase ? boxesOfDimension(phase) : [] })
  return {
    name: 'loop',
    title: 'loop L, broken at the plant input',
    panel,
    levels: levelsOf(panel, loopStep, value => `${formatFixed(value * degreesPerDb - 180, 0)}°`),
    decades: decadesOf(panel),
    curves: drawCurves(response, panel, sketches, [phase, gain]),
    dimensions: [phase, gain].filter(dimension => dimension !== null),
    bandwidth: null,
  }
}

/** At the gain crossover, from the odd half turn that the margin is counted from to the phase. */
function phaseMargin(answer: FrequencyAnswer, height: (degrees: number) => number, taken: Taken): Dimension | null {
  const { gainCrossover, phaseMarginDeg, phaseCrossover } = answer.readings
  const figures = gainCrossover === null ? null : readAt(answer.response, gainCrossover)
  if (!figures || phaseMarginDeg === null) return null
  const halfTurn = Math.round((figures.phaseDeg - phaseMarginDeg + 180) / 360) * 360 - 180
  return marginAt('phaseMarginDeg', answer, gainCrossover!, phaseCrossover, [height(halfTurn), height(halfTurn + phaseMarginDeg)], taken)
}

/** At the phase crossover, from 0 dB to |L|. */
function gainMargin(answer: FrequencyAnswer, taken: Taken): Dimension | null {
  const { phaseCrossover, gainMarginDb, gainCrossover } = answer.readings
  return phaseCrossover === null || gainMarginDb === null ? null : marginAt('gainMarginDb', answer, phaseCrossover, gainCrossover, [0, -gainMarginDb], taken)
}

/** The words at the lower of the two crossovers would stand to its left, those at the higher one to its right. */
function marginAt(
  reading: 'phaseMarginDeg' | 'gainMarginDb', { readings, stable }: FrequencyAnswer, frequency: number, other: number | null,
  heights: readonly [number, number], taken: Taken,
): Dimension | null {
  const value = readings[reading]!
  const text = formatReading(describeReading(reading), value, stable)
  return drawDimension({ reading, value, text }, frequency, heights, other !== null && frequency < other ? 'end' : 'start', taken)
}
