import type { Complex } from '../../numerics/complex'
import * as polynomial from '../../numerics/polynomial'
import { roots } from '../../numerics/roots'
import { diesOut } from '../stability'
import { delayedRoots, delayedStable } from '../delay/delayed-roots'
import { breakaways } from './breakaways'
import type { DelayedFunction, LoopAnalysis } from '../types'
import type { FactoredLoop } from './factored-loop'
import { meetDelayedRay } from './meet-delayed-ray'
import { meetRay, type Meeting } from './meet-ray'

/**
 * Gains K > 0 that put roots on the imaginary axis, with the frequency (rad/s, 0 for a root at the origin), by rising frequency. Upper half only;
 * none where whole stretches of the axis are locus.
 */
export function imaginaryAxisCrossings(open: DelayedFunction): LoopAnalysis['imaginaryAxisCrossings'] {
  const atOrigin = -polynomial.coefficientOf(open.denominator, 0) / polynomial.coefficientOf(open.numerator, 0)
  return [
    ...(atOrigin > 0 && Number.isFinite(atOrigin) ? [{ frequency: 0, gain: atOrigin }] : []),
    ...meet(open, { re: 0, im: 1 }).map(({ point, gain }) => ({ frequency: point.im, gain })),
  ]
}

/**
 * Where the ray of a damping ratio meets the locus, nearest the origin first. At damping ratio 1 the ray is the negative real axis, whose segments lie on the
 * locus as a whole; the meetings are then the breakaway points on it, to which those of slightly less damping tend.
 * @param dampingRatio in (0, 1]
 */
export function rayIntersections(loop: FactoredLoop, dampingRatio: number): Meeting[] {
  if (dampingRatio === 1) {
    return breakaways(loop)
      .filter(({ point }) => point.im === 0 && point.re < 0)
      .map(({ point, gain }) => ({ point, gain }))
      .sort((a, b) => b.point.re - a.point.re)
  }
  return meet(loop, { re: -dampingRatio, im: Math.sqrt((1 - dampingRatio) * (1 + dampingRatio)) })
}

function meet(open: DelayedFunction, direction: Complex): Meeting[] {
  return open.deadTime > 0 ? meetDelayedRay(open, direction) : meetRay(open, direction)
}

/**
 * The gain at which a biproper loop loses a root to infinity (1 + L = 0 there), or null. With a dead time the whole chain of the delay's roots passes the
 * imaginary axis there, whatever the sign.
 */
export function gainAtInfinity(open: DelayedFunction): number | null {
  if (polynomial.degree(open.numerator) !== polynomial.degree(open.denominator)) return null
  const gain = -polynomial.leading(open.denominator) / polynomial.leading(open.numerator)
  if (open.deadTime > 0) return Math.abs(gain)
  return gain > 0 ? gain : null
}

/**
 * Intervals of K > 0 in which all closed-loop roots have negative real parts, rising; null: no upper limit. Between two gains that put a root on the
 * imaginary axis or at infinity stability cannot change, so one trial in each gap decides.
 * @param open with its common poles and zeros: a cancelled unstable pole stays unstable
 * @param crossings of the same loop
 */
export function stableGain(open: DelayedFunction, crossings: LoopAnalysis['imaginaryAxisCrossings']): LoopAnalysis['stableGain'] {
  const infinity = gainAtInfinity(open)
  const limits = [...crossings.map(({ gain }) => gain), ...(infinity === null ? [] : [infinity])]
    .sort((a, b) => a - b)
    .filter((gain, i, all) => i === 0 || gain > all[i - 1]! * (1 + 1e-12))
  const edges: (number | null)[] = [0, ...limits, null]
  const intervals: LoopAnalysis['stableGain'] = []
  for (let i = 0; i + 1 < edges.length; i++) {
    const from = edges[i]!
    const to = edges[i + 1] ?? null
    if (isStable(open, trialGain(open, from, to))) intervals.push([from, to])
  }
  return intervals
}

function trialGain(open: DelayedFunction, from: number, to: number | null): number {
  if (to !== null) return from > 0 ? Math.sqrt(from * to) : to / 2
  return from > 0 ? 2 * from : balancedGain(open)
}

/** With no limit at all any gain tells; one that weighs N and D alike keeps its roots clear of rounding. */
function balancedGain({ numerator, denominator }: DelayedFunction): number {
  const places = [...roots(denominator), ...roots(numerator)].map(root => Math.hypot(root.re, root.im)).filter(size => size > 0)
  const frequency = places.length === 0 ? 1 : Math.exp(places.reduce((sum, size) => sum + Math.log(size), 0) / places.length)
  return polynomial.evaluateSize(denominator, frequency) / polynomial.evaluateSize(numerator, frequency)
}

function isStable({ numerator, denominator, deadTime }: DelayedFunction, gain: number): boolean {
  if (deadTime > 0) return delayedStable(delayedRoots({ numerator: polynomial.scale(numerator, gain), denominator, deadTime }))
  return roots(polynomial.combine(1, denominator, gain, numerator)).every(diesOut)
}
