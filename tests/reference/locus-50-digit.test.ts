/**
 * The locus of one-gain loops against the 50-digit cases (made with mpmath by the definitions of docs/method.md; seeded random loops).
 */
import { describe, expect, it } from 'vitest'
import { analyzeLoop } from '#shared/control/analyze'
import { holdDeviation } from '../helpers/published'
import cases from '../fixtures/loops-50-digit.json'

const relativeTolerance = 1e-10

function holdClose(group: string, found: number, wanted: number): void {
  holdDeviation(group, found === wanted ? 0 : Math.abs(found / wanted - 1), relativeTolerance)
}

describe.each(cases.oneGain.map((c, i) => ({ ...c, name: `${i} ${c.kind}` })))('locus $name', (c) => {
  const analysis = analyzeLoop({ plant: c.plant, rateFeedback: 0 }, { form: 'gain', shape: c.shape }, { dampingRatio: c.dampingRatio })

  it('meets the ray in the same places', () => {
    const found = analysis.rayIntersections!
    const wanted = [...c.rayIntersections].sort((a, b) => b.point.re - a.point.re)
    expect(found).toHaveLength(wanted.length)
    wanted.forEach(({ point, gain }, i) => {
      holdClose('Gain where the ray meets the locus', found[i]!.gain, gain)
      holdClose('Place where the ray meets the locus', found[i]!.point.re, point.re)
      holdClose('Place where the ray meets the locus', found[i]!.point.im, point.im)
    })
  })

  it('crosses the imaginary axis at the same frequencies and gains', () => {
    const found = analysis.imaginaryAxisCrossings.filter(({ frequency }) => frequency > 0)
    expect(found).toHaveLength(c.imaginaryAxisCrossings.length)
    c.imaginaryAxisCrossings.forEach(({ frequency, gain }, i) => {
      holdClose('Frequency of a crossing of the imaginary axis', found[i]!.frequency, frequency)
      holdClose('Gain of a crossing of the imaginary axis', found[i]!.gain, gain)
    })
  })

  it('breaks away from the real axis in the same places', () => {
    const found = analysis.breakaways.filter(({ point }) => point.im === 0).sort((a, b) => a.point.re - b.point.re)
    expect(found).toHaveLength(c.breakaways.length)
    c.breakaways.forEach(({ point, gain }, i) => {
      holdClose('Place of a breakaway', found[i]!.point.re, point)
      holdClose('Gain of a breakaway', found[i]!.gain, gain)
    })
  })

  it('has the same centroid of asymptotes', () => {
    holdClose('Centroid of the asymptotes', analysis.asymptotes!.centroid, c.centroid)
  })

  it('is stable at the gain of the case exactly where all its roots lie left of the axis', () => {
    const inside = analysis.stableGain.some(([from, to]) => c.gain > from && (to === null || c.gain < to))
    expect(inside).toBe(c.closedLoopPoles.every(root => root.re < 0))
  })
})
