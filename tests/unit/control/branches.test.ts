import { describe, expect, it } from 'vitest'
import { analyzeLoop } from '#shared/control/analyze'
import type { LoopAnalysis, TransferFunction } from '#shared/control/types'
import { distance } from '#shared/numerics/complex'
import { fromRoots } from '#shared/numerics/polynomial'
import { cutOff, extentOf, followRoot, place, residual, type BranchPoint } from '../../helpers/locus-check'
import { randomLoop } from '../../helpers/random-loop'
import { seededRandom } from '../../helpers/random'

const analyze = (plant: TransferFunction) => analyzeLoop({ plant, rateFeedback: 0 }, { form: 'gain' })
const real = (...places: number[]) => places.map(re => ({ re, im: 0 }))

/** Farthest a piece may reach: a share of the figure, or of the distance from the origin further out. */
const longestPiece = 0.041
/** Largest deviation of a piece from the true branch, likewise. */
const sagitta = 1.5e-3

function scaleAt(analysis: LoopAnalysis, ...points: BranchPoint[]): number {
  return Math.max(extentOf(analysis), ...points.map(([re, im]) => Math.hypot(re, im)))
}

/** Checks that hold for every locus; random ones and traps go through them alike. */
function expectSound(analysis: LoopAnalysis): void {
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

describe('branches', () => {
  it.each([1, 2, 3, 4, 5, 6])('are sound for random loops of order %i', (order) => {
    const random = seededRandom(100 + order)
    for (let round = 0; round < 40; round++) {
      const analysis = analyze(randomLoop(random, order))
      if (extentOf(analysis) > 0) expectSound(analysis)
    }
  })

  it('are sound at order 12', () => {
    const random = seededRandom(12)
    for (let round = 0; round < 6; round++) expectSound(analyze(randomLoop(random, 12)))
  })

  it('never swap: following the nearest root in small steps leads to the same places', () => {
    const random = seededRandom(31)
    let checked = 0
    for (let round = 0; round < 40; round++) {
      const analysis = analyze(randomLoop(random, 2 + Math.floor(4 * random())))
      const meetingGains = analysis.breakaways.map(({ gain }) => gain)
      for (const { points } of analysis.branches) {
        const i = 1 + Math.floor((points.length - 2) * random())
        const from = points[i]
        const to = points[i + 1]
        if (from === undefined || to === undefined || from[2] === 0 || to[2] === from[2]) continue
        if (meetingGains.some(gain => gain >= from[2] * 0.999 && gain <= to[2] * 1.001)) continue
        checked++
        expect(distance(followRoot(analysis, from, to[2], 60), place(to)) / scaleAt(analysis, from, to)).toBeLessThan(1e-8)
      }
    }
    expect(checked).toBeGreaterThan(60)
  })

  it('cut no corner, least of all at breakaways', () => {
    const random = seededRandom(77)
    for (let round = 0; round < 25; round++) {
      const analysis = analyze(randomLoop(random, 2 + Math.floor(4 * random())))
      for (const { points } of analysis.branches) {
        const atMeetings = points.flatMap(([re, im], i) =>
          analysis.breakaways.some(({ point }) => Math.hypot(point.re - re, point.im - im) < 1e-9 * extentOf(analysis)) ? [i, i + 1] : [])
        for (const i of [...atMeetings, 1 + Math.floor((points.length - 1) * random())]) {
          const from = points[i - 1]
          const to = points[i]
          if (from !== undefined && to !== undefined) {
            expect(cutOff(analysis, from, to) / scaleAt(analysis, from, to)).toBeLessThan(sagitta)
          }
        }
      }
    }
  })

  it.each<[string, TransferFunction]>([
    ['triple root', { numerator: [1, 1], denominator: [1, 9, 0, 0] }],
    ['nearly a triple root', { numerator: [1, 1], denominator: fromRoots(real(0, 0, -9.02)) }],
    ['just no triple root', { numerator: [1, 1], denominator: fromRoots(real(0, 0, -8.98)) }],
    ['four branches in one point', { numerator: [1], denominator: [1, 4, 6, 4, 0] }],
    ['complex breakaways', { numerator: [1], denominator: [1, 8, 36, 80, 0] }],
    ['fivefold pole', { numerator: [1], denominator: fromRoots(real(-0.7, -0.7, -0.7, -0.7, -0.7)) }],
    ['double zero', { numerator: [1, 2, 1], denominator: [1, 0, 0, 0] }],
    ['dipole beside the path', { numerator: [1, 1.0001], denominator: fromRoots(real(0, -1, -4)) }],
    ['dipole off the axis', { numerator: [1, 0.2, 25.01], denominator: fromRoots([...real(0, -3), { re: -0.11, im: 5 }, { re: -0.11, im: -5 }]) }],
    ['poles over five decades', { numerator: [1, 3], denominator: fromRoots(real(0, -0.01, -1, -30, -1000)) }],
    ['circle about a zero', { numerator: [1, 4], denominator: fromRoots(real(-1, -2)) }],
    ['negative gain', { numerator: [-1, -2], denominator: [1, 2, 2, 0] }],
  ])('are sound at a trap: %s', (_, plant) => {
    expectSound(analyze(plant))
  })

  it('put the exact breakaway gain into the branches that meet', () => {
    const analysis = analyze({ numerator: [1], denominator: [1, 3, 2, 0] })
    const { point, gain } = analysis.breakaways[0]!
    const through = analysis.branches.filter(({ points }) => points.some(([re, im, k]) => im === 0 && Math.abs(re - point.re) < 1e-12 && Math.abs(k / gain - 1) < 1e-12))
    expect(through).toHaveLength(2)
  })
})
