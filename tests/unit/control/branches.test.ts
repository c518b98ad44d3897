import { describe, expect, it } from 'vitest'
import { analyzeLoop } from '#shared/control/analyze'
import type { TransferFunction } from '#shared/control/types'
import { fromRoots } from '#shared/numerics/polynomial'
import { cutOff, expectSound, extentOf, sagitta } from '../../helpers/locus-check'
import { real } from '../../helpers/loops'

const analyze = (plant: TransferFunction) => analyzeLoop({ plant, rateFeedback: 0 }, { form: 'gain' })

describe('branches', () => {
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

  it('go round a loop between two breakaways, however small in the figure', () => {
    const analysis = analyze({ numerator: fromRoots(real(-2.08, -0.449), 0.357), denominator: fromRoots(real(-0.638, -0.638, -0.468, 0.436)) })
    for (const { points } of analysis.branches) {
      points.slice(1).forEach((point, i) => expect(cutOff(analysis, points[i]!, point)).toBeLessThan(sagitta * extentOf(analysis)))
    }
  })

  it('put the exact breakaway gain into the branches that meet', () => {
    const analysis = analyze({ numerator: [1], denominator: [1, 3, 2, 0] })
    const { point, gain } = analysis.breakaways[0]!
    const through = analysis.branches.filter(({ points }) => points.some(([re, im, k]) => im === 0 && Math.abs(re - point.re) < 1e-12 && Math.abs(k / gain - 1) < 1e-12))
    expect(through).toHaveLength(2)
  })
})
