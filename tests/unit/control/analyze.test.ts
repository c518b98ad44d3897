import { describe, expect, it } from 'vitest'
import { analyzeLoop } from '#shared/control/analyze'
import { NoAnswerError } from '#shared/control/errors'
import type { LoopAnalysis } from '#shared/control/types'
import { fromRoots } from '#shared/numerics/polynomial'
import { seededRandom } from '../../helpers/random'

const real = (...places: number[]) => places.map(re => ({ re, im: 0 }))

function analyze(numerator: number[], denominator: number[], dampingRatio?: number): LoopAnalysis {
  return analyzeLoop({ plant: { numerator, denominator }, rateFeedback: 0 }, { form: 'gain' }, { dampingRatio })
}

describe('analyzeLoop, the named traps', () => {
  it('open-loop poles on the imaginary axis: departure angles right, no crossing at zero gain', () => {
    const oscillator = analyze([1, 2], [1, 0, 4, 0])
    expect(oscillator.imaginaryAxisCrossings).toEqual([])
    expect(oscillator.departures.map(({ angleDeg }) => angleDeg)).toEqual([180, 45, -45])
    expect(oscillator.stableGain).toEqual([])
    expect(oscillator.openLoop.type).toBe(1)
  })

  it('a locus that lies along the imaginary axis: no isolated crossing, no stable gain', () => {
    const doubleIntegrator = analyze([3], [1, 0, 0], 0.7)
    expect(doubleIntegrator.imaginaryAxisCrossings).toEqual([])
    expect(doubleIntegrator.stableGain).toEqual([])
    expect(doubleIntegrator.rayIntersections).toEqual([])
    expect(doubleIntegrator.departures.map(({ angleDeg }) => angleDeg)).toEqual([-90, 90])
    for (const { points } of doubleIntegrator.branches) expect(points.every(([re, im]) => Math.abs(re) <= 1e-14 * Math.abs(im))).toBe(true)
  })

  it('a triple root: three branches meet and part on the exact point', () => {
    // (s + 1)/(s^2 (s + 9)): s^3 + 9 s^2 + 27 s + 27 = (s + 3)^3 at K = 27.
    const triple = analyze([1, 1], [1, 9, 0, 0])
    expect(triple.breakaways).toHaveLength(1)
    expect(triple.breakaways[0]!.point.re).toBeCloseTo(-3, 6)
    expect(triple.breakaways[0]!.gain).toBeCloseTo(27, 9)
    for (const { points } of triple.branches) {
      const nearest = Math.min(...points.map(([re, im]) => Math.hypot(re + 3, im)))
      expect(nearest).toBeLessThan(1e-6)
    }
  })

  it('a double breakaway: four branches meet in one point', () => {
    // s (s + 2)(s^2 + 2 s + 2) + 1 = (s + 1)^4.
    const fourfold = analyze([1], [1, 4, 6, 4, 0])
    expect(fourfold.breakaways).toHaveLength(1)
    expect(fourfold.breakaways[0]!.point.re).toBeCloseTo(-1, 8)
    expect(fourfold.breakaways[0]!.gain).toBeCloseTo(1, 12)
    expect(fourfold.branches).toHaveLength(4)
    for (const { points } of fourfold.branches) {
      expect(Math.min(...points.map(([re, im]) => Math.hypot(re + 1, im)))).toBeLessThan(1e-7)
    }
    expect(fourfold.stableGain[0]![1]).toBeCloseTo(5, 12)
  })

  it('complex breakaways where the gain is real', () => {
    // s (s + 4)(s^2 + 4 s + 20): breakaway -2 at K = 64, and -2 +- j sqrt 6 at K = 100.
    const found = analyze([1], fromRoots([...real(0, -4), { re: -2, im: 4 }, { re: -2, im: -4 }])).breakaways
    expect(found.map(({ gain }) => Math.round(gain * 1e9) / 1e9)).toEqual([64, 100, 100])
    expect(found[1]!.point.im).toBeCloseTo(Math.sqrt(6), 12)
    expect(found[2]!.point).toEqual({ re: found[1]!.point.re, im: -found[1]!.point.im })
  })

  it('multiple poles from rounded coefficients: one place, angles spread evenly', () => {
    const fourfold = analyze([1], fromRoots(real(-0.3, -0.3, -0.3, -0.3)), 0.5)
    expect(new Set(fourfold.openLoop.poles.map(({ re }) => re)).size).toBe(1)
    expect(fourfold.openLoop.poles[0]!.re).toBeCloseTo(-0.3, 12)
    expect(fourfold.departures.map(({ angleDeg }) => angleDeg)).toEqual([-135, -45, 45, 135])
    expect(fourfold.breakaways).toEqual([])
    expect(fourfold.imaginaryAxisCrossings[0]!.gain).toBeCloseTo(4 * 0.3 ** 4, 12)
  })

  it('several gains on one ray, nearest the origin first', () => {
    const three = analyze([1, 1.5], fromRoots(real(0, -1, -10)), 0.8).rayIntersections!
    expect(three.map(({ gain }) => gain.toFixed(2))).toEqual(['7.34', '12.82', '39.62'])
  })
})

describe('analyzeLoop, signs and limits', () => {
  it('a negative gain of the plant turns the asymptotes', () => {
    const negative = analyze([-1], fromRoots(real(0, -1, -2)), 0.5)
    expect(negative.asymptotes).toEqual({ centroid: -1, anglesDeg: [0, 120, 240] })
    expect(negative.departures.map(({ angleDeg }) => angleDeg)).toEqual([0, 180, 0])
    expect(negative.stableGain).toEqual([])
    // The ray of 0.5 is parallel to the asymptote of 120 degrees: nothing far out may be taken for a meeting.
    expect(negative.rayIntersections).toEqual([])
  })

  it('a crossing at the origin bounds the gain', () => {
    const unstable = analyze([1], fromRoots(real(1, -3)))
    expect(unstable.imaginaryAxisCrossings).toEqual([{ frequency: 0, gain: 3 }])
    expect(unstable.stableGain).toEqual([[3, null]])
    const conditionally = analyze([1, 2], [1, 3, -1])
    expect(conditionally.stableGain).toEqual([[0.5, null]])
  })

  it('stability above a gain, open loop unstable', () => {
    // Conditionally stable: 1 + K (s + 1)^2/s^3 is stable above K = 1/2.
    expect(analyze([1, 2, 1], [1, 0, 0, 0]).stableGain).toEqual([[0.5, null]])
  })

  it('a biproper loop passes through infinity: the branch ends there and another begins on the far side', () => {
    const analysis = analyze([-1, -2, -5], [1, 1, 3])
    expect(analysis.asymptotes).toBeNull()
    expect(analysis.stableGain).toEqual([[0, 0.5], [1, null]])
    expect(analysis.branches).toHaveLength(3)
    const [first, out, back] = analysis.branches.map(({ points }) => points)
    expect(first![0]![2]).toBe(0)
    expect(out!.at(-1)![2]).toBeLessThan(1)
    expect(out!.at(-1)![0]).toBeGreaterThan(20)
    expect(back![0]![2]).toBeGreaterThan(1)
    expect(back![0]![0]).toBeLessThan(-20)
    // None of the pieces crosses infinity by a straight line.
    for (const { points } of analysis.branches) points.slice(1).forEach(([re], i) => expect(Math.abs(re - points[i]![0])).toBeLessThan(20))
  })

  it('a biproper loop of positive gain has no such passage', () => {
    expect(analyze([1, 2, 5], [1, 1, 3]).branches).toHaveLength(2)
  })

  it('common poles and zeros stay as fixed points and keep an unstable mode', () => {
    const analysis = analyze([1, -1], fromRoots(real(1, -2, -3)))
    expect(analysis.stableGain).toEqual([])
    const fixed = analysis.branches.find(({ points }) => points.every(([re]) => re === 1))
    expect(fixed!.points).toHaveLength(2)
    expect(analyze([1, 1], [1, 1]).branches).toHaveLength(1)
    expect(analyze([2], [1]).branches).toEqual([])
  })

  it('damping ratio 1: the breakaway points on the negative real axis, the limit of smaller ratios', () => {
    const denominator = fromRoots(real(0, -1, -2))
    const [limit, ...others] = analyze([1], denominator, 1).rayIntersections!
    const [near] = analyze([1], denominator, 1 - 1e-9).rayIntersections!
    expect(others).toEqual([])
    expect(limit!.gain).toBeCloseTo(2 / (3 * Math.sqrt(3)), 12)
    expect(Math.abs(near!.gain / limit!.gain - 1)).toBeLessThan(1e-6)
  })

  it('arrival angles at complex zeros', () => {
    // Zeros -1 +- 2j, poles 0 and -4 (hand: 180 - 90 + (180 - atan 2) + atan(2/3) degrees).
    const { arrivals } = analyze([1, 2, 5], fromRoots(real(0, -4)))
    const degrees = (radians: number) => radians * 180 / Math.PI
    const upper = arrivals.find(({ zero }) => zero.im > 0)!.angleDeg
    expect(upper).toBeCloseTo(180 - 90 + (180 - degrees(Math.atan(2))) + degrees(Math.atan(2 / 3)) - 360, 10)
  })
})

describe('analyzeLoop, forms', () => {
  const servo = { plant: { numerator: [2], denominator: [1, 3, 0] }, rateFeedback: 0 }

  it('two-gain forms run along the factor on the present gains', () => {
    const analysis = analyzeLoop(servo, { form: 'pd' }, { gains: { kp: 5, kd: 0.5 } })
    expect(analysis.openLoop.numerator).toEqual([1, 10])
    expect(analysis.openLoop.zeros).toEqual([{ re: -10, im: 0 }])
    const lead = analyzeLoop(servo, { form: 'lead', poleZeroRatio: 4 }, { gains: { k: 7, zero: -2, pole: -8 } })
    expect(lead.openLoop.numerator).toEqual([2, 4])
    expect(lead.openLoop.poles.map(({ re }) => re)).toEqual([-8, -3, 0])
  })

  it('names the gains where they are needed', () => {
    expect(() => analyzeLoop(servo, { form: 'pi' })).toThrow(NoAnswerError)
    expect(() => analyzeLoop(servo, { form: 'pi' })).toThrow(expect.objectContaining({ path: 'gains' }))
  })

  it('takes the inner rate feedback into the plant', () => {
    expect(analyzeLoop({ ...servo, rateFeedback: 0.5 }, { form: 'gain' }).openLoop.denominator).toEqual([1, 4, 0])
  })

  it('refuses more zeros than poles', () => {
    expect(() => analyze([1, 2, 3], [1, 1])).toThrow(/more zeros than poles/)
  })
})

describe('analyzeLoop, numbers beyond range', () => {
  it('answers in one sentence instead of with infinities', () => {
    expect(() => analyze([1], [1e200, 1, 0])).toThrow(/choose units nearer/)
    expect(() => analyze([1e-200], [1, 1])).toThrow(NoAnswerError)
  })

  it('draws whatever it accepts with finite numbers, or refuses it', () => {
    const random = seededRandom(4)
    for (let round = 0; round < 60; round++) {
      const coefficient = () => (random() - 0.5) * 10 ** (60 * random() - 30)
      const order = 1 + Math.floor(4 * random())
      try {
        const analysis = analyze([coefficient()], Array.from({ length: order + 1 }, coefficient), 0.5)
        expect(analysis.branches.flatMap(({ points }) => points.flat()).every(Number.isFinite)).toBe(true)
      }
      catch (error) {
        expect(error).toBeInstanceOf(NoAnswerError)
      }
    }
  })

  it('traces slow poles a billion times nearer to the origin than fast ones', () => {
    const { branches, breakaways } = analyze([1], fromRoots(real(0, -1e-3, -1e6)))
    expect(breakaways[0]!.point.re).toBeCloseTo(-5e-4, 10)
    const through = branches.filter(({ points }) => points.some(([re, im]) => im === 0 && Math.abs(re - breakaways[0]!.point.re) < 1e-12))
    expect(through).toHaveLength(2)
  })
})
