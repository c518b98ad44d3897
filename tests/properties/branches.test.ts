/** What holds for the branches of every root locus: W. R. Evans, "Graphical analysis of control systems" (1948). */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { analyzeLoop } from '#shared/control/analyze'
import type { LoopAnalysis, TransferFunction } from '#shared/control/types'
import { distance } from '#shared/numerics/complex'
import { arbitraryLoop } from '../helpers/arbitrary-loop'
import { cutOff, expectSound, extentOf, followRoot, place, sagitta, scaleAt } from '../helpers/locus-check'
import { holds } from '../helpers/property'

const analyze = (plant: TransferFunction) => analyzeLoop({ plant, rateFeedback: 0 }, { form: 'gain' })

/** A share of the way along something, chosen by fast-check, so that a counterexample names its piece. */
const share = fc.integer({ min: 0, max: 99 }).map(n => n / 100)

describe('branches', () => {
  it.each([1, 2, 3, 4, 5, 6])('at order %i begin at the poles, end at zeros or go out, and every node is a root of 1 + K L0', (order) => {
    holds(100 + order, 40, [arbitraryLoop(order)], (plant) => {
      const analysis = analyze(plant)
      if (extentOf(analysis) > 0) expectSound(analysis)
    })
  })

  it('do so at order 12', () => {
    holds(12, 6, [arbitraryLoop(12)], plant => expectSound(analyze(plant)))
  })

  it('that go out take one asymptote each', () => {
    holds(61, 150, [arbitraryLoop(1, 6)], (plant) => {
      const analysis = analyze(plant)
      const { asymptotes, openLoop: { relativeDegree, zeros } } = analysis
      const extent = extentOf(analysis)
      fc.pre(asymptotes !== null && extent > 0)
      const ends = analysis.branches.map(({ points }) => points.at(-1)!).filter(end => !zeros.some(zero => distance(zero, place(end)) < 2e-3 * extent))
      const degrees = ends.map(([re, im]) => (Math.atan2(im, re - asymptotes!.centroid) * 180 / Math.PI + 360) % 360)
      const gap = (a: number, b: number) => Math.min(Math.abs(a - b), 360 - Math.abs(a - b))
      const taken = degrees.map(angle => asymptotes!.anglesDeg.reduce((best, next, i, all) => gap(next, angle) < gap(all[best]!, angle) ? i : best, 0))
      expect(new Set(taken).size).toBe(relativeDegree)
      degrees.forEach((angle, i) => expect(gap(angle, asymptotes!.anglesDeg[taken[i]!]!)).toBeLessThan(90 / relativeDegree))
    })
  })

  it('never swap: following the nearest root in small steps leads to the same places', () => {
    let checked = 0
    holds(31, 40, [arbitraryLoop(2, 5), share], (plant, along) => {
      const analysis = analyze(plant)
      for (const { points } of analysis.branches) {
        const i = 1 + Math.floor((points.length - 2) * along)
        const from = points[i]
        const to = points[i + 1]
        if (from === undefined || to === undefined || from[2] === 0 || to[2] === from[2]) continue
        if (meetsBetween(analysis, from[2], to[2])) continue
        checked++
        expect(distance(followRoot(analysis, from, to[2], 60), place(to)) / scaleAt(analysis, from, to)).toBeLessThan(1e-8)
      }
    })
    expect(checked).toBeGreaterThan(60)
  })

  it('cut no corner, least of all at breakaways', () => {
    holds(77, 25, [arbitraryLoop(2, 5), share], (plant, along) => {
      const analysis = analyze(plant)
      for (const { points } of analysis.branches) {
        const atMeetings = points.flatMap(([re, im], i) =>
          analysis.breakaways.some(({ point }) => Math.hypot(point.re - re, point.im - im) < 1e-9 * extentOf(analysis)) ? [i, i + 1] : [])
        for (const i of [...atMeetings, 1 + Math.floor((points.length - 1) * along)]) {
          const from = points[i - 1]
          const to = points[i]
          if (from !== undefined && to !== undefined) expect(cutOff(analysis, from, to) / scaleAt(analysis, from, to)).toBeLessThan(sagitta)
        }
      }
    })
  })
})

/** Whether roots fall together at a gain between the two, or next to them: the nearest root is no guide there. */
function meetsBetween({ breakaways }: LoopAnalysis, from: number, to: number): boolean {
  return breakaways.some(({ gain }) => gain >= from * 0.999 && gain <= to * 1.001)
}
