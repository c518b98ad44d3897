import type { ReadingName } from '#shared/control/types'
import { formatFigure, formatFixed, gap } from '~/utils/bench/format'
import { describeReading, formatReading } from '~/utils/bench/readings'
import type { FrequencyAnswer } from './answer'
import type { FrequencyFigures } from './read-at'

const rate = (frequency: number) => `${formatFigure(frequency, 3)}${gap}rad/s`
const decibels = (value: number) => `${formatFixed(value, 1)}${gap}dB`

/** The figures at one frequency, as the cursor says them. */
export function sayFigures(frequency: number, { magnitudeDb, phaseDeg, sensitivityDb, complementaryDb }: FrequencyFigures): string {
  return `${rate(frequency)}: loop ${decibels(magnitudeDb)} at ${formatFixed(phaseDeg, 1)}°, sensitivity ${decibels(sensitivityDb)}, `
    + `complementary sensitivity ${decibels(complementaryDb)}`
}

/** What the drawing tells at a glance, for whoever does not see it. */
export function describeFrequency({ readings, response, stable }: FrequencyAnswer): string {
  const { gainCrossover, phaseCrossover, gainMarginDb, sensitivityPeak, bandwidth } = readings
  const say = (name: ReadingName & keyof typeof readings) =>
    `${describeReading(name).label.toLowerCase()} ${formatReading(describeReading(name), readings[name], stable)}`
  const at = (frequency: number | null) => frequency === null ? '' : ` at ${rate(frequency)}`
  return [
    gainCrossover === null ? 'The loop never crosses 0 dB.' : `The loop crosses 0 dB${at(gainCrossover)}: ${say('phaseMarginDeg')}.`,
    gainMarginDb === null ? 'Its phase never crosses −180°.' : `Its phase crosses −180°${at(phaseCrossover)}: ${say('gainMarginDb')}.`,
    sensitivityPeak === null ? 'The sensitivity has no finite peak.' : `The ${say('sensitivityPeak')}${at(response.sensitivityPeakFrequency)}.`,
    bandwidth === null ? 'There is no bandwidth.' : `The ${say('bandwidth')}.`,
  ].join(' ')
}
