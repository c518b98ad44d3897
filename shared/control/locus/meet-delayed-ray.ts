import * as complex from '../../numerics/complex'
import type { Complex } from '../../numerics/complex'
import { findRoot } from '../../numerics/find-root'
import * as polynomial from '../../numerics/polynomial'
import { roots } from '../../numerics/roots'
import { delayFactor } from '../delay/quasi-polynomial'
import type { DelayedFunction } from '../types'
import type { Meeting } from './meet-ray'

/** Turn (radians) of the delay, and ratio of radii, from one place of the grid to the next. */
const turn = 0.2
const ratio = 1.05
const mostPlaces = 6000
/** Of the meetings that go on for ever so many are told. */
const mostMeetings = 12
/** The delay's own chain of branches meets every ray for ever; so many turns of the delay beyond the poles and zeros are looked at. */
const turnsBeyond = 2
/** Distances of the grid about the place where the line passes a pole or zero, in shares of how near it passes. */
const passing = [-8, -4, -2, -1, -0.5, 0, 0.5, 1, 2, 4, 8]
/** Angle (radians) to the locus that rounding may leave. */
const onLocus = 1e-7

/**
 * Where the half line s = r direction, r > 0, meets the locus of a loop with dead time, nearest the origin first: bracketed on a fine grid of r, then found by a
 * bracketing root finder. Of the infinitely many the nearest ones: a dozen at most, to twice the farthest pole or zero and two turns of the delay beyond.
 * @param direction of size 1, not along the real axis
 */
export function meetDelayedRay(open: DelayedFunction, direction: Complex): Meeting[] {
  const lack = (r: number) => complex.arg(complex.negate(loopAt(open, complex.scale(direction, r))))
  const meetings: Meeting[] = []
  let before: { r: number, lack: number } | null = null
  for (const r of gridOf(open, direction)) {
    if (meetings.length === mostMeetings) break
    const here = { r, lack: lack(r) }
    if (before && Math.sign(before.lack) * Math.sign(here.lack) === -1 && Math.abs(before.lack - here.lack) < Math.PI) {
      const radius = findRoot(lack, before.r, r)
      const point = complex.scale(direction, radius)
      const gain = 1 / complex.abs(loopAt(open, point))
      if (Math.abs(lack(radius)) < onLocus && Number.isFinite(gain) && gain > 0) meetings.push({ point, gain })
    }
    before = here
  }
  return meetings
}

/** L0 with its dead time. */
export function loopAt({ numerator, denominator, deadTime }: DelayedFunction, s: Complex): Complex {
  const value = complex.divide(polynomial.evaluateComplex(numerator, s), polynomial.evaluateComplex(denominator, s))
  return complex.multiply(value, delayFactor(s, deadTime))
}

function gridOf(open: DelayedFunction, direction: Complex): number[] {
  const places = [...roots(open.numerator), ...roots(open.denominator)].filter(place => complex.abs(place) > 0)
  const pace = open.deadTime * Math.abs(direction.im)
  const sizes = [...places.map(complex.abs), 1 / open.deadTime]
  const end = 2 * Math.max(...places.map(complex.abs), 0) + turnsBeyond * 2 * Math.PI / pace
  const grid: number[] = []
  const step = Math.max(turn / pace, end / mostPlaces)
  for (let r = Math.min(...sizes) / 1000; r < end; r += Math.min(step, (ratio - 1) * r)) grid.push(r)
  for (const place of places) {
    const along = place.re * direction.re + Math.abs(place.im) * direction.im
    const aside = Math.max(Math.abs(Math.abs(place.im) * direction.re - place.re * direction.im), 1e-9 * complex.abs(place))
    for (const share of passing) grid.push(along + share * aside)
  }
  return grid.filter(r => r > 0 && r <= end).sort((a, b) => a - b)
}
