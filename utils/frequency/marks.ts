import type { FrequencyResponse, ReadingName, Readings } from '#shared/control/types'

/** A frequency, rad/s, that a reading is taken at. */
export interface FrequencyMark {
  reading: ReadingName
  frequency: number
}

/** Decades within which a frequency counts as that of a mark. */
const near = 0.03

/** The frequencies that readings stand for: the crossovers of the two margins, the peak of |S|, the bandwidth. Those at 0 or at infinity are left out. */
export function markedFrequencies(readings: Readings, { sensitivityPeakFrequency }: Pick<FrequencyResponse, 'sensitivityPeakFrequency'>): FrequencyMark[] {
  const places: [ReadingName, number | null][] = [
    ['phaseMarginDeg', readings.gainCrossover],
    ['gainMarginDb', readings.phaseCrossover],
    ['sensitivityPeak', sensitivityPeakFrequency],
    ['bandwidth', readings.bandwidth],
  ]
  return places.flatMap(([reading, frequency]) => frequency !== null && frequency > 0 ? [{ reading, frequency }] : [])
}

/** The readings whose frequency this one is, as far as a hand can tell. */
export function readingsNear(marks: readonly FrequencyMark[], frequency: number | null): ReadingName[] {
  if (frequency === null) return []
  return marks.filter(mark => Math.abs(Math.log10(mark.frequency / frequency)) <= near).map(({ reading }) => reading)
}

/** The next marked frequency above (1) or below (-1) one, or null. */
export function nextMark(marks: readonly FrequencyMark[], frequency: number, direction: 1 | -1): number | null {
  const beyond = marks.map(mark => mark.frequency).filter(place => direction * (place - frequency) > 1e-9 * frequency)
  return beyond.length === 0 ? null : direction * Math.min(...beyond.map(place => direction * place))
}
