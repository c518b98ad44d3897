import type { LoopAnalysis } from '#shared/control/types'
import { distance, type Complex } from '#shared/numerics/complex'
import { formatPlain } from '~/utils/bench/format'

/** One fact about the locus: what it is, where, at which gain and angle, as far as it has them. */
export interface LocusFact {
  name: string
  /** rad/s; two ends, the left one first, for a stretch of the real axis. */
  place?: Complex | readonly [number, number]
  /** Two ends for a range, null: no upper limit. */
  gain?: number | readonly [number, number | null]
  /** Degrees. */
  angleDeg?: number
}

/** Places this close, relative to their size, are one: an analysis without cancelled pairs knows them to other last digits. */
const sameWidth = 1e-6

/** Every fact of the analysis in the order in which a locus is drawn by hand. Poles carry their angle of departure, zeros that of arrival. */
export function locusFacts(analysis: LoopAnalysis): LocusFact[] {
  const { openLoop, asymptotes, breakaways, imaginaryAxisCrossings, stableGain } = analysis
  const departures = analysis.departures.map(({ pole, angleDeg }) => ({ place: pole, angleDeg }))
  const arrivals = analysis.arrivals.map(({ zero, angleDeg }) => ({ place: zero, angleDeg }))
  return [
    ...withAngles('Pole', openLoop.poles, departures),
    ...withAngles('Zero', openLoop.zeros, arrivals),
    ...realAxisSegments(openLoop).map(place => ({ name: 'Real axis', place })),
    ...(asymptotes ? [{ name: 'Centroid', place: { re: asymptotes.centroid, im: 0 } }] : []),
    ...(asymptotes?.anglesDeg ?? []).map(angleDeg => ({ name: 'Asymptote', angleDeg })),
    ...breakaways.map(({ point, gain }) => ({ name: 'Breakaway or break-in', place: point, gain })),
    ...imaginaryAxisCrossings.map(({ frequency, gain }) => ({ name: 'Imaginary-axis crossing', place: { re: 0, im: frequency }, gain })),
    ...stableGain.map(gain => ({ name: 'Stable gain', gain })),
    ...(stableGain.length === 0 ? [{ name: 'No stable gain' }] : []),
  ]
}

/** Each place once, with the next angle that belongs to it; a pole that a zero takes away has none. */
function withAngles(name: string, places: readonly Complex[], angles: { place: Complex, angleDeg: number }[]): LocusFact[] {
  const left = [...angles]
  return places.map((place) => {
    const index = left.findIndex(other => distance(other.place, place) <= sameWidth * Math.hypot(place.re, place.im))
    const [angle] = index < 0 ? [] : left.splice(index, 1)
    return { name, place, ...(angle ? { angleDeg: angle.angleDeg } : {}) }
  })
}

/**
 * Stretches of the real axis that are locus for K > 0, the rightmost first: an odd number of real poles and zeros lies to the right, an even one where
 * the gain of L0 is negative.
 */
export function realAxisSegments({ poles, zeros, numerator, denominator }: LoopAnalysis['openLoop']): [number, number][] {
  const parity = isPositive({ numerator, denominator }) ? 1 : 0
  const marks = [...poles, ...zeros].filter(({ im }) => im === 0).map(({ re }) => re).sort((a, b) => b - a)
  const edges = [Infinity, ...marks, -Infinity]
  return edges.slice(1)
    .map((left, i): [number, number] => [left, edges[i]!])
    .filter(([left, right], i) => i % 2 === parity && !isOnePlace(left, right))
}

/** Whether the gain of L0, ratio of its leading coefficients, is positive. */
function isPositive({ numerator, denominator }: Pick<LoopAnalysis['openLoop'], 'numerator' | 'denominator'>): boolean {
  const leading = (p: number[]) => p.find(coefficient => coefficient !== 0) ?? 0
  return leading(numerator) * Math.sign(leading(denominator)) > 0
}

/**
 * What a dead time T makes of the locus, null without one: far to the right L0 e^(-sT) has the angle -wT, so that the branches end along
 * w = (2k + 1) pi/T, or 2k pi/T where the gain of L0 is negative.
 */
export function deadTimeNote(open: LoopAnalysis['openLoop']): string | null {
  if (open.deadTime === 0) return null
  const multiples = isPositive(open) ? 'odd' : 'even'
  return `With the dead time there are no asymptotes: branches go out to the right along horizontals at the ${multiples} multiples of π/T = `
    + `${formatPlain(Math.PI / open.deadTime, 4)} rad/s. Crossings go on for ever; the nearest are told.`
}

function isOnePlace(left: number, right: number): boolean {
  return Number.isFinite(left) && right - left <= sameWidth * Math.abs(left)
}

/**
 * The facts as tab-separated text for a spreadsheet, every number in full precision; a stretch or range takes two lines, from and to.
 * @param gain what the gain is: k, or a factor on the present gains
 */
export function locusFactsText(analysis: LoopAnalysis, gain: string): string {
  const { type, relativeDegree } = analysis.openLoop
  const rows = [
    ['Type', type], ['Relative degree', relativeDegree],
    ['Fact', 'Real part (rad/s)', 'Imaginary part (rad/s)', `Gain (${gain})`, 'Angle (deg)'],
    ...locusFacts(analysis).flatMap(rowsOf),
  ]
  return rows.map(cells => cells.join('\t')).join('\n') + '\n'
}

type Cell = string | number

function rowsOf({ name, place, gain, angleDeg }: LocusFact): Cell[][] {
  const isRange = (ends: LocusFact['place'] | LocusFact['gain']): ends is readonly [number, number | null] => Array.isArray(ends)
  if (isRange(place)) return place.map((end, i) => [`${name}, ${ends[i]}`, bounded(end), 0, '', ''])
  if (isRange(gain)) return gain.map((end, i) => [`${name}, ${ends[i]}`, '', '', end ?? 'no limit', ''])
  const { re, im } = place as Complex | undefined ?? { re: '', im: '' }
  return [[name, re, im, gain as number | undefined ?? '', angleDeg ?? '']]
}

const ends = ['from', 'to'] as const

function bounded(end: number | null): Cell {
  return end === null || Number.isFinite(end) ? end ?? '' : `${end < 0 ? 'minus' : 'plus'} infinity`
}
