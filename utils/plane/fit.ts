import { abs, type Complex } from '#shared/numerics/complex'
import type { LoopAnalysis } from '#shared/control/types'
import { fitBounds, type Bounds, type Viewport } from './viewport'

type FitAnalysis = Pick<LoopAnalysis, 'openLoop' | 'breakaways' | 'imaginaryAxisCrossings'>

/** Marks further out than this multiple of the reach of the design are left outside the first view. */
const farFactor = 2.2
const padding = 44

/**
 * The part of the s-plane that a design is about: the origin, the design point and its conjugate, and those poles, zeros, breakaways and
 * crossings that are not many times further out. Symmetric about the real axis.
 */
export function interestingBounds(analysis: FitAnalysis | null, designPoint: Complex): Bounds {
  const marks = analysis
    ? [
        ...analysis.openLoop.poles,
        ...analysis.openLoop.zeros,
        ...analysis.breakaways.map(({ point }) => point),
        ...analysis.imaginaryAxisCrossings.map(({ frequency }) => ({ re: 0, im: frequency })),
      ].filter(mark => Number.isFinite(mark.re) && Number.isFinite(mark.im))
    : []
  const reach = Math.max(abs(designPoint), nearestOutward(marks)) || 1
  const shown = [designPoint, ...marks.filter(mark => abs(mark) <= farFactor * reach)]
  const right = Math.max(0.35 * reach, ...shown.map(mark => mark.re))
  const left = Math.min(-0.35 * reach, ...shown.map(mark => mark.re))
  // Room beyond the design point for the outer end of its ray.
  const top = Math.max(0.6 * reach, 1.6 * designPoint.im, ...shown.map(mark => Math.abs(mark.im)))
  return { left, right, bottom: -top, top }
}

/** The first view of a loop, and the one that the fit key returns to. */
export function fitView(analysis: FitAnalysis | null, designPoint: Complex, width: number, height: number): Viewport {
  return fitBounds(interestingBounds(analysis, designPoint), width, height, Math.min(padding, width / 8, height / 8))
}

/**
 * Whether a loop differs so much from the one before that the old view has lost its meaning: another number of poles or zeros, or another
 * order of size. A parameter that moves a pole a little does not count.
 */
export function isAnotherLoop(before: FitAnalysis | null, after: FitAnalysis | null): boolean {
  if (!before || !after) return before !== after
  if (before.openLoop.poles.length !== after.openLoop.poles.length) return true
  if (before.openLoop.zeros.length !== after.openLoop.zeros.length) return true
  const ratio = typicalSize(after) / typicalSize(before)
  return ratio > 2.5 || ratio < 0.4
}

function nearestOutward(marks: Complex[]): number {
  const sizes = marks.map(abs).filter(size => size > 0)
  return sizes.length > 0 ? Math.min(...sizes) : 0
}

function typicalSize(analysis: FitAnalysis): number {
  const sizes = analysis.openLoop.poles.map(abs).filter(size => size > 0)
  if (sizes.length === 0) return 1
  return Math.exp(sizes.reduce((sum, size) => sum + Math.log(size), 0) / sizes.length)
}
