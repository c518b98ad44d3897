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
    const gain = a[2] > 0 ? a[2] * (b[2] / a[2]) ** share : b[2] * share
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
