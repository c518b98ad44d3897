import type { Complex } from '../../numerics/complex'
import { diesOut } from '../stability'
import { lastOutside, type Trajectory } from './trajectory'

/** Room after the response has settled, so that the eye sees it has. */
const roomAfterSettling = 1.4
/** A tail is shown for at most this many times the time that the main movement (down to 10 %) takes: it must not squash the picture. */
const longestTail = 6
/** More cycles than this cannot be told apart on a screen. */
const mostCycles = 25
/** An unstable response is shown while it grows e^5 = 150-fold. */
const growthTimes = 5
/** Seconds; beyond these the numbers themselves give out. */
const shortest = 1e-200
const longest = 1e200
const niceSteps = [1, 1.2, 1.5, 2, 2.5, 3, 4, 5, 6, 8, 10]

/**
 * How long a response is worth looking at, in seconds, rounded up so that the time axis stands still during a small drag: until it has settled to
 * 2 % with some room after; a slow tail of small size is cut, a growing response is shown for a few of its growth times.
 */
export function chooseDuration(y: Trajectory, poles: readonly Complex[]): number {
  if (poles.length === 0) return 1
  return roundUp(y.decays ? settlingView(y, poles) : growthView(poles))
}

function settlingView(y: Trajectory, poles: readonly Complex[]): number {
  const largest = largestTransient(y)
  const settled = largest > 0 ? lastOutside(y, 0.02 * largest) : 0
  if (settled === 0) return modesToSlowest(poles)
  const moved = lastOutside(y, 0.1 * largest)
  const view = roomAfterSettling * Math.min(settled, longestTail * Math.max(moved, settled / 1000))
  return Math.min(view, cyclesOfSlowestOscillation(poles))
}

/** Many cycles of the slowest pair; infinite where nothing oscillates more than it decays. */
function cyclesOfSlowestOscillation(poles: readonly Complex[]): number {
  const ringing = poles.filter(pole => pole.im > Math.abs(pole.re)).map(pole => pole.im)
  return ringing.length > 0 ? mostCycles * 2 * Math.PI / Math.min(...ringing) : Infinity
}

function growthView(poles: readonly Complex[]): number {
  const fastest = poles.reduce((most, pole) => pole.re > most.re ? pole : most)
  if (fastest.re > 0) {
    const growth = growthTimes / fastest.re
    return fastest.im > 0 ? Math.min(growth, mostCycles / 2 * 2 * Math.PI / Math.abs(fastest.im)) : growth
  }
  const lasting = poles.filter(pole => !diesOut(pole) && pole.im > 0).map(pole => pole.im)
  return lasting.length > 0 ? 10 * 2 * Math.PI / Math.max(...lasting) : modesToSlowest(poles)
}

/** Five times as long as the slowest root, those at the origin left out, takes for one radian or time constant. */
function modesToSlowest(poles: readonly Complex[]): number {
  const sizes = poles.map(pole => Math.hypot(pole.re, pole.im)).filter(size => size > 0)
  return sizes.length > 0 ? 5 / Math.min(...sizes) : 1
}

/** To a few percent, which is enough to choose a time axis. */
function largestTransient(y: Trajectory): number {
  let largest = 0
  for (let k = 0, here = y.instant(0); here !== null && here.envelope > largest; here = y.instant(++k)) largest = Math.max(largest, Math.abs(here.value))
  return largest
}

/** The next of a few round numbers. */
function roundUp(duration: number): number {
  if (!(duration > shortest && duration < longest)) return duration > 1 ? longest : shortest
  const decade = 10 ** Math.floor(Math.log10(duration))
  const step = niceSteps.find(candidate => candidate * decade >= duration * (1 - 1e-9))!
  // Through text, so that 3 * 0.1 comes out as 0.3.
  return Number((step * decade).toPrecision(3))
}
