import { expect } from 'vitest'
import { distance, type Complex } from '#shared/numerics/complex'
import { combine, evaluateComplex, evaluateSize } from '#shared/numerics/polynomial'
import { roots } from '#shared/numerics/roots'
import type { LoopAnalysis } from '#shared/control/types'

export type BranchPoint = [number, number, number]

/** Size of the figure: the farthest pole, zero, breakaway or crossing. */
export function extentOf(analysis: LoopAnalysis): number {
  const { poles, zeros } = analysis.openLoop
  const marks = [...poles, ...zeros, ...analysis.breakaways.map(({ point }) => point)]
  return Math.max(...marks.map(({ re, im }) => Math.hypot(re, im)), ...analysis.imaginaryAxisCrossings.map(({ frequency }) => frequency))
}

export function place([re, im]: BranchPoint): Complex {
  return { re, im }
}

/** |D + K N| at a node against the rounding of its terms. */
export function residual({ openLoop: { numerator, denominator } }: LoopAnalysis, point: BranchPoint): number {
  const s = place(point)
  const gain = point[2]
  const d = evaluateComplex(denominator, s)
  const n = evaluateComplex(numerator, s)
  const size = Math.hypot(s.re, s.im)
  const terms = evaluateSize(denominator, size) + gain * evaluateSize(numerator, size)
  // At a pole in the origin nothing is left of either.
  return terms === 0 ? 0 : Math.hypot(d.re + gain * n.re, d.im + gain * n.im) / terms
}

/**
 * Follows one root from a gain to another in many small steps, always to the nearest root: a slow and independent witness of where a branch goes.
 */
export function followRoot({ openLoop: { numerator, denominator } }: LoopAnalysis, from: BranchPoint, to: number, steps: number): Complex {
  let at = place(from)
  for (let i = 1; i <= steps; i++) {
    const gain = from[2] > 0 ? from[2] * (to / from[2]) ** (i / steps) : to * i / steps
    const all = roots(combine(1, denominator, gain, numerator))
    at = all.reduce((best, next) => distance(next, at) < distance(best, at) ? next : best)
  }
  return at
}

/** Distance from the middle of a piece to the nearest closed-loop root between its two gains: what a straight piece cuts off. */
export function cutOff({ openLoop: { numerator, denominator } }: LoopAnalysis, a: BranchPoint, b: BranchPoint): number {
  const middle = { re: (a[0] + b[0]) / 2, im: (a[1] + b[1]) / 2 }
  const distanceAt = (share: number) => {
    // From a pole to beside a zero in one piece the gain runs over many decades.
    const gain = a[2] > 0 ? a[2] * (b[2] / a[2]) ** share : b[2] * share ** 8
    return Math.min(...roots(combine(1, denominator, gain, numerator)).map(root => distance(root, middle)))
  }
  let low = 0
  let high = 1
  for (let i = 0; i < 30; i++) {
    const third = (high - low) / 3
    if (distanceAt(low + third) < distanceAt(high - third)) high -= third
    else low += third
  }
  return distanceAt((low + high) / 2)
}

/** Farthest a piece may reach: a share of the figure, or of the distance from the origin further out. */
const longestPiece = 0.041
/** Largest deviation of a piece from the true branch, likewise. */
export const sagitta = 1.5e-3

/** What those shares are taken of. */
export function scaleAt(analysis: LoopAnalysis, ...points: BranchPoint[]): number {
  return Math.max(extentOf(analysis), ...points.map(([re, im]) => Math.hypot(re, im)))
}

/** Checks that hold for every locus; arbitrary ones and traps go through them alike. */
export function expectSound(analysis: LoopAnalysis): void {
  const { poles, zeros, relativeDegree } = analysis.openLoop
  const extent = extentOf(analysis)
  const starts = analysis.branches.filter(({ points }) => points[0]![2] === 0).map(({ points }) => place(points[0]!))
  expect(starts).toHaveLength(poles.length)
  for (const pole of poles) expect(Math.min(...starts.map(start => distance(start, pole)))).toBeLessThanOrEqual(1e-12 * extent)
  let outward = 0
  for (const { points } of analysis.branches) {
    points.forEach((point, i) => {
      expect(residual(analysis, point)).toBeLessThan(1e-12)
      if (i === 0) return
      const before = points[i - 1]!
      expect(point[2]).toBeGreaterThanOrEqual(before[2])
      expect(distance(place(before), place(point)) / scaleAt(analysis, before, point)).toBeLessThan(longestPiece)
    })
    expect(points.length).toBeLessThan(400)
    const end = points[points.length - 1]!
    const atZero = zeros.some(zero => distance(zero, place(end)) < 2e-3 * extent)
    const outside = Math.hypot(end[0], end[1]) > 5 * extent
    expect(atZero || outside).toBe(true)
    if (outside) outward++
  }
  if (relativeDegree > 0) expect(outward).toBe(relativeDegree)
  // Conjugates: every branch has its mirror image.
  for (const { points } of analysis.branches) {
    const middle = points[points.length >> 1]!
    expect(analysis.branches.some(other => other.points.some(([re, im, gain]) => re === middle[0] && im === -middle[1] && gain === middle[2]))).toBe(true)
  }
}
