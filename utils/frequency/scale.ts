import type { FrequencyResponse } from '#shared/control/types'
import { formatUnit } from '~/utils/bench/format'
import type { Range } from '~/utils/response/scale'

/**
 * One height for both curves of the loop: 0 dB and -180 degrees share a line, so that phase margin and gain margin are measured from the same one,
 * and a grid line is a round figure on either side.
 */
export interface LoopScale {
  range: Range
  degreesPerDb: number
}

export const loopStep = 20
export const sensitivityStep = 10
/** What is drawn of |L| whatever it does: nobody designs by what lies further away. */
const loopReach = { least: 20, usual: 60, most: 120 }
const sensitivityReach = { below: -40, least: 10, most: 40 }
/** 45 degrees a grid line, or 90. */
const degrees = { fine: 45 / loopStep, coarse: 90 / loopStep }

/** @param marginDb the gain margin, which is kept in sight; null: none */
export function loopScale({ magnitudeDb, phaseDeg }: FrequencyResponse, marginDb: number | null): LoopScale {
  const near = phaseDeg.filter((_, i) => Math.abs(magnitudeDb[i]!) <= loopReach.usual)
  const [lead, lag] = [Math.max(-Infinity, ...near) + 180, Math.min(Infinity, ...near) + 180]
  const degreesPerDb = lead > degrees.fine * loopReach.usual ? degrees.coarse : degrees.fine
  const above = [Math.max(...magnitudeDb), lead / degreesPerDb].map(value => Math.min(loopReach.usual, value))
  const below = [Math.min(...magnitudeDb), lag / degreesPerDb].map(value => Math.max(-loopReach.usual, value))
  const margin = marginDb !== null && Math.abs(marginDb) < loopReach.most ? -marginDb : 0
  return {
    range: {
      min: loopStep * Math.floor(Math.min(-loopReach.least, margin, ...below) / loopStep),
      max: loopStep * Math.ceil(Math.max(loopReach.least, margin, ...above) / loopStep),
    },
    degreesPerDb,
  }
}

/** The heights of |S| and |T|: always down to the same, up to the peak. */
export function sensitivityRange({ sensitivityDb, complementaryDb }: FrequencyResponse): Range {
  const peak = Math.max(...sensitivityDb, ...complementaryDb)
  const max = sensitivityStep * Math.ceil((peak + 2) / sensitivityStep)
  return { min: sensitivityReach.below, max: Math.min(sensitivityReach.most, Math.max(sensitivityReach.least, max)) }
}

/** Whole decades within a range of decades, thinned out to about `count`. */
export function wholeDecades({ min, max }: Range, count: number): number[] {
  const step = Math.max(1, Math.ceil((max - min) / Math.max(1, count)))
  const first = Math.ceil(min / step - 1e-9)
  const last = Math.floor(max / step + 1e-9)
  return Array.from({ length: Math.max(0, last - first + 1) }, (_, i) => (first + i) * step + 0)
}

/** 0.01, 1, 100, and beyond that powers of ten. */
export function formatDecade(exponent: number): string {
  return exponent >= -3 && exponent <= 4 ? String(Number(`1e${exponent}`)) : formatUnit(`10^${exponent}`)
}
