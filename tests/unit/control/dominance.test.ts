import { describe, expect, it } from 'vitest'
import { overshootFromDamping } from '#shared/control/design-point'
import { dominance } from '#shared/control/dominance'
import { estimateAt } from '#shared/control/estimate'
import { solveDesign } from '#shared/control/solve'
import type { DesignSolution } from '#shared/control/types'
import type { Complex } from '#shared/numerics/complex'
import { fromRoots } from '#shared/numerics/polynomial'
import { closedLoopOf, evaluateLoop, loopOf, product, real } from '../../helpers/loops'
import { publishedCase } from '../../helpers/published'
import { seededRandom } from '../../helpers/random'

const told = (solution: DesignSolution) => solution.dominance!.sentence
const points = (value: number) => `${Math.abs(value).toFixed(1)} points`

/** Largest value less 1, in percent, of the step response of (s/z + 1) w²/(s² + 2 zeta w s + w²), w = 1: where its slope vanishes, from the formula. */
function overshootWithZero(zeta: number, z: number): number {
  const damped = Math.sqrt(1 - zeta * zeta)
  const t = (Math.PI - Math.atan2(damped, z - zeta)) / damped
  const excess = -Math.cos(damped * t) - (zeta - 1 / z) / damped * Math.sin(damped * t)
  return 100 * Math.exp(-zeta * t) * excess
}

describe('the figures of dominance', () => {
  // Residues by hand: 2a/((s² + 2 s + 2)(s + a)) at -a leaves 2/(a² - 2 a + 2), the pair sqrt(2) a/sqrt((a - 1)² + 1).
  it.each([0.5, 3, 8])('are those of the partial fractions, third root at -%d', (a) => {
    const { dominance } = closedLoopOf([2 * a], product([1, 2, 2], [1, a]))
    const weights = { pair: Math.SQRT2 * a / Math.hypot(a - 1, 1), real: 2 / (a * a - 2 * a + 2) }
    expect(dominance!.residueShare).toBeCloseTo(weights.pair / (weights.pair + weights.real), 12)
    expect(dominance!.nextPoleRatio).toBeCloseTo(a, 12)
    expect(dominance!.nearestZeroDistance).toBeNull()
  })

  it('give a double root the largest sizes of both its terms', () => {
    // 3/((s + 1)²(s + 3) s): -3/4 e^-t - 3/2 t e^-t, which grows to 3/(2e), and -1/4 e^-3t.
    const { dominance } = closedLoopOf([3], product([1, 1], [1, 1], [1, 3]))
    const double = 0.75 + 1.5 / Math.E
    expect(dominance!.residueShare).toBeCloseTo(double / (double + 0.25), 10)
    expect(dominance!.nextPoleRatio).toBeCloseTo(3, 10)
  })

  it('leave out a root that a zero takes away, and still measure the zero', () => {
    const { dominance } = solveDesign(loopOf([1, 0.2], product([1, 0.2], [1, 1, 0])), { form: 'gain' }, { gains: { k: 1 } })
    expect(dominance!.residueShare).toBeCloseTo(1, 12)
    expect(dominance!.nextPoleRatio).toBeNull()
    expect(dominance!.nearestZeroDistance).toBeCloseTo(Math.hypot(0.3, Math.sqrt(0.75)), 12)
  })

  it('have no share where nothing comes to rest or nothing moves', () => {
    expect(evaluateLoop({ numerator: [60], denominator: [1, 3, 2, 0] }).dominance).toMatchObject({ residueShare: null, nextPoleRatio: expect.closeTo(-5, 9) })
    expect(evaluateLoop({ numerator: [6], denominator: [1, 3, 2, 0] }).dominance).toMatchObject({ residueShare: null, nextPoleRatio: null })
    expect(solveDesign(loopOf([1], [1, 3, 2]), { form: 'gain' }, { gains: { k: 0 } }).dominance!.residueShare).toBeNull()
  })

  it('do not exist for a loop without roots', () => {
    expect(evaluateLoop({ numerator: [2], denominator: [1] }).dominance).toBeNull()
  })
})

describe('the sentence on a zero', () => {
  const a05 = publishedCase('A05')
  it(a05.title, () => {
    const exact = a05.exact('PO_percent')
    a05.inputs('a_over_zeta_wn').forEach((ratio, i) => {
      const z = ratio * 0.45
      expect(overshootWithZero(0.45, z)).toBeCloseTo(exact[i]!, 9)
      const solution = closedLoopOf([1 / z, 1], [1, 0.9, 1])
      const added = exact[i]! - overshootFromDamping(0.45)
      expect(told(solution)).toMatch(new RegExp(`^The zero at -${z} adds ${points(added)} of overshoot to the second-order estimate and makes settling `))
    })
  })

  it('is the same for an output that goes the other way, and for another settling band', () => {
    const sentence = 'The zero at -0.9 adds 19.3 points of overshoot to the second-order estimate and makes settling 10 % shorter.'
    expect(told(closedLoopOf([1 / 0.9, 1], [1, 0.9, 1]))).toBe(sentence)
    expect(told(closedLoopOf([-1 / 0.9, -1], [1, 0.9, 1]))).toBe(sentence)
    expect(told(closedLoopOf([1 / 0.9, 1], [1, 0.9, 1], { response: { settlingBandPercent: 5, amplitude: -3 } }))).toBe(sentence)
  })

  const b14 = publishedCase('B14')
  it(b14.title, () => {
    const designPoint = { re: -3.5, im: 3.5 * Math.sqrt(3) }
    const [zero] = b14.exact('zero')
    const solution = solveDesign(loopOf([1], [1, 1, 0]), { form: 'lead', poleZeroRatio: 20 / zero! }, { designPoint })
    // The closed loop without its zero, the final value kept.
    const third = solution.closedLoopPoles.find(pole => pole.im === 0)!.re
    const denominator = product([1, 7, 49], [1, -third])
    const without = closedLoopOf([denominator.at(-1)!], denominator).readings.overshootPercent!
    const { overshootPercent } = solution.readings
    expect(told(solution)).toContain(`The zero at -5.4 adds ${points(overshootPercent! - without)} of overshoot`)
    expect(told(solution)).toContain(`; in all the overshoot is ${points(overshootPercent! - overshootFromDamping(0.5))} above the estimate.`)
    expect(solution.dominance!.nearestZeroDistance).toBeCloseTo(Math.hypot(zero! - 3.5, designPoint.im), 9)
  })
})

describe('the sentence on further roots', () => {
  it('says that the pair speaks for the loop where it does', () => {
    const solution = closedLoopOf([5], product([1, 1, 1], [1, 5]))
    expect(told(solution)).toBe('The pair at -0.5 ± 0.866j carries 96 % of the response; estimate and loop agree within 1 point of overshoot and 5 % of settling time.')
    expect(Math.abs(solution.readings.overshootPercent! - solution.estimate.overshootPercent!)).toBeLessThan(1)
  })

  it('says that the pair is not the slowest', () => {
    const solution = closedLoopOf([0.2], product([1, 1, 1], [1, 0.2]))
    const pairAlone = closedLoopOf([1], [1, 1, 1]).readings
    const times = (solution.readings.settlingTime! / pairAlone.settlingTime!).toFixed(1)
    expect(told(solution)).toBe('The design pair is not the slowest: the root at -0.2 carries 83 % of the response, '
      + `takes ${points(pairAlone.overshootPercent!)} off the overshoot and makes settling ${times} times as long.`)
  })

  it('names a slow root with the zero beside it as one', () => {
    // N. S. Nise, Example 8.8 (published.json B05), the third of its designs.
    const b05 = publishedCase('B05')
    const solution = solveDesign(loopOf([1, 1.5], product([1, 0], [1, 1], [1, 10])), { form: 'gain' }, { gains: { k: b05.exact('K')[2]! } })
    const added = b05.exact('exact_PO_percent')[2]! - overshootFromDamping(0.8)
    expect(told(solution)).toMatch(new RegExp(`^The root at -1.8 with the zero at -1.5 beside it adds ${points(added)} of overshoot to the second-order estimate`))
  })

  it('names two that only together explain the difference, and sums up more', () => {
    // Either alone still takes most of the overshoot: leaving out the other shows less than half of the difference.
    const two = closedLoopOf([0.56], product([1, 1, 1], [1, 0.7], [1, 0.8]))
    const pairAlone = overshootFromDamping(0.5)
    expect(told(two)).toMatch(new RegExp(`^The root at -0.8 and the root at -0.7 together take ${points(pairAlone - two.readings.overshootPercent!)} off the overshoot`))
    const lags = product([1, 1, 1], [1, 1.5], [1, 1.7], [1, 1.9], [1, 2.1], [1, 2.3])
    const solution = closedLoopOf([lags.at(-1)!], lags)
    const taken = pairAlone - solution.readings.overshootPercent!
    expect(told(solution)).toMatch(new RegExp(`^The other roots together take ${points(taken)} off the overshoot`))
  })
})

describe('the sentence where the estimate has nothing to go by', () => {
  it('says that the rule of thumb itself is rough', () => {
    // zeta = 0.3: 11.23 s against 4/0.3.
    expect(told(evaluateLoop({ numerator: [1], denominator: [1, 0.6, 0] })))
      .toBe('The pair at -0.3 ± 0.954j carries 100 % of the response; at its damping the loop settles 16 % sooner than the estimate.')
  })

  it('names what does not die out', () => {
    expect(told(evaluateLoop({ numerator: [60], denominator: [1, 3, 2, 0] })))
      .toBe('The pair at 1 ± 3.32j does not die out, so the second-order estimate says nothing about this loop.')
    expect(told(evaluateLoop({ numerator: [-1], denominator: [1, 1, 0] })))
      .toBe('The root at 0.618 does not die out, so the second-order estimate says nothing about this loop.')
  })

  it('says that a final value of 0 has no overshoot', () => {
    expect(told(closedLoopOf([1, 0], [1, 0.9, 1]))).toBe('The final value is 0, so overshoot and settling time of the second-order estimate have no meaning here.')
  })

  it('says that no root lies at a point off the locus', () => {
    const solution = solveDesign(loopOf([1], [1, 3, 2, 0]), { form: 'gain' }, { designPoint: { re: -1, im: 1 } })
    const above = solution.readings.overshootPercent! - solution.estimate.overshootPercent!
    expect(told(solution)).toBe(`No root lies at the design point: the pair at -0.239 ± 0.858j is the nearest one, and the overshoot is ${points(above)} above the estimate.`)
  })

  it('takes a real design point as the double root that it is', () => {
    const solution = solveDesign(loopOf([1], [1, 3, 0]), { form: 'rate' }, { designPoint: { re: -2, im: 0 } })
    expect(told(solution)).toBe('The double root at -2 carries 100 % of the response; the loop settles 46 % later than the estimate.')
  })
})

describe('dominance of random loops', () => {
  it('is always told in finite figures and one or two short sentences', () => {
    const random = seededRandom(1948)
    for (let round = 0; round < 150; round++) {
      const poles: Complex[] = []
      const order = 1 + Math.floor(7 * random())
      while (poles.length < order) {
        const re = round % 7 === 0 ? 4 - 8 * random() : -0.1 - 6 * random()
        const im = random() < 0.5 && order - poles.length > 1 ? 5 * random() : 0
        const times = random() < 0.15 ? 2 : 1
        for (let n = 0; n < times; n++) poles.push(...(im === 0 ? [{ re, im }] : [{ re, im }, { re, im: -im }]))
      }
      const zeros = real(...Array.from({ length: Math.floor(random() * poles.length) }, () => random() < 0.2 ? 0 : 3 - 6 * random()))
      const denominator = fromRoots(poles)
      const solution = closedLoopOf(fromRoots(zeros, 10 ** (4 * random() - 2)), denominator)
      const { sentence, ...figures } = solution.dominance!
      expect(sentence).toMatch(/^[A-Z][^.]*(\.\d[^.]*)*\.$/)
      expect(sentence).not.toMatch(/NaN|Infinity|undefined|null/)
      for (const figure of Object.values(figures)) expect(figure === null || Number.isFinite(figure)).toBe(true)
      if (figures.residueShare !== null) expect(figures.residueShare).toBeLessThanOrEqual(1)
    }
  })

  it('stands a root of high order', () => {
    for (const order of [5, 12, 20]) {
      const poles = real(...new Array<number>(order).fill(-1))
      const of = dominance({ poles, zeros: [], stable: true, shape: { overshootPercent: 0, settlingTime: 20 } }, { re: -1, im: 0 }, estimateAt({ re: -1, im: 0 }), true)
      expect(of).toMatchObject({ residueShare: 1, nextPoleRatio: null, nearestZeroDistance: null })
    }
  })
})
