import { gainAtInfinity, imaginaryAxisCrossings, rayIntersections, stableGain } from './locus/crossings'
import { arrivals, departures } from './locus/directions'
import { asymptotes } from './locus/asymptotes'
import { breakaways } from './locus/breakaways'
import { cancelCommon, cancellationWidth, factor, invisibleWidth, type FactoredLoop } from './locus/factored-loop'
import { traceBranches } from './locus/trace-branches'
import { openLoop } from './controller'
import { NoAnswerError } from './errors'
import { relativeDegree, systemType } from './transfer-function'
import type { Controller, Gains, LoopAnalysis, LoopModel } from './types'

/**
 * The root locus of a loop along its overall gain K > 0: 1 + K L0(s) = 0.
 *
 * For the forms `gain` and `lead` K is their k; for pd, pi and rate it is a factor on the present gains, which is 1 at the present design.
 * After W. R. Evans, "Graphical analysis of control systems" (1948), every figure from its algebraic condition.
 *
 * @param options.dampingRatio in (0, 1]: where its ray meets the locus is reported too
 * @param options.gains the present gains; needed for every form but `gain`, where they have no bearing
 * @throws NoAnswerError for a loop with more zeros than poles, without gains where they are needed, and with all gains zero
 */
export function analyzeLoop(model: LoopModel, controller: Controller, options: AnalysisOptions = {}): LoopAnalysis {
  try {
    const analysis = analyze(model, controller, options)
    if (isFiniteThroughout(analysis)) return analysis
  }
  catch (error) {
    // The root finder refuses coefficients that overflowed on the way.
    if (!(error instanceof RangeError)) throw error
  }
  throw new NoAnswerError('the poles and zeros of this loop lie too far apart to draw one locus of them')
}

/** Of a dead time that is drawn, in the time scale of the figure. */
const longestDelay = 60

interface AnalysisOptions {
  dampingRatio?: number
  gains?: Gains
}

function isFiniteThroughout(value: unknown): boolean {
  if (typeof value === 'number') return Number.isFinite(value)
  if (typeof value !== 'object' || value === null) return true
  return (Array.isArray(value) ? value : Object.values(value)).every(isFiniteThroughout)
}

function analyze(model: LoopModel, controller: Controller, options: AnalysisOptions): LoopAnalysis {
  const open = openLoop(model, controller, options.gains)
  const whole = factor(open)
  const { loop } = cancelCommon(whole, cancellationWidth)
  const { loop: drawn, cancelled } = cancelCommon(whole, invisibleWidth)
  const meetings = breakaways(loop)
  const crossings = imaginaryAxisCrossings(loop)
  const beyond = [...crossings.map(({ gain }) => gain), gainAtInfinity(loop) ?? 0]
  const extent = extentOf([
    ...whole.poles, ...whole.zeros, ...meetings.map(({ point }) => point),
    // The crossings of the delay's own chain go on for ever.
    ...crossings.slice(0, open.deadTime > 0 ? 1 : undefined).map(({ frequency }) => ({ re: 0, im: frequency })),
  ], loop)
  const drawnMeetings = drawn.poles.length === loop.poles.length ? meetings : breakaways(drawn)
  // With a dead time beyond all the loop's own times the delay's branches fill the plane: nothing to be seen in a drawing.
  const drawable = drawn.poles.length > 0 && open.deadTime * extent <= longestDelay
  const branches = !drawable ? [] : traceBranches(drawn, drawnMeetings, beyond, extent)
  const last = Math.max(1, ...branches.flatMap(({ points }) => points[points.length - 1]![2]))
  return {
    openLoop: {
      numerator: open.numerator,
      denominator: open.denominator,
      zeros: whole.zeros,
      poles: whole.poles,
      deadTime: open.deadTime,
      type: systemType(open),
      relativeDegree: relativeDegree(open),
    },
    asymptotes: asymptotes(open),
    breakaways: meetings.map(({ point, gain }) => ({ point, gain })),
    imaginaryAxisCrossings: crossings,
    departures: departures(loop),
    arrivals: arrivals(loop),
    stableGain: stableGain(open, crossings),
    branches: [...branches, ...cancelled.map(({ re, im }) => ({ points: [[re, im, 0], [re, im, last]] as [number, number, number][] }))],
    ...(options.dampingRatio === undefined ? {} : { rayIntersections: rayIntersections(loop, options.dampingRatio) }),
  }
}

/** Size of the figure: the farthest of its marks from the origin; for marks at the origin alone the radius at which |L0| is 1. */
function extentOf(marks: { re: number, im: number }[], loop: FactoredLoop): number {
  const farthest = Math.max(0, ...marks.map(({ re, im }) => Math.hypot(re, im)))
  if (farthest > 0) return farthest
  const excess = loop.poles.length - loop.zeros.length
  return excess > 0 ? Math.abs(loop.gain) ** (1 / excess) : 1
}
