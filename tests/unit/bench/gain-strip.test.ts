import { describe, expect, it } from 'vitest'
import { scaleGains } from '#shared/control/scale-gains'
import { factorAt, factorBetween, shareOf } from '~/utils/bench/gain-strip'

describe('the strip of the gain', () => {
  it('is logarithmic, the present gain in the middle, and ends at a hundredth and a hundredfold', () => {
    expect([0.01, 0.1, 1, 10, 100].map(shareOf)).toEqual([0, 0.25, 0.5, 0.75, 1].map(share => expect.closeTo(share, 14)))
    expect([1e-5, 1e5].map(shareOf)).toEqual([0, 1])
    for (const factor of [0.013, 0.7, 1, 42]) expect(factorAt(shareOf(factor))).toBeCloseTo(factor, 12)
    expect([-1, 2].map(factorAt)).toEqual([expect.closeTo(0.01, 14), expect.closeTo(100, 10)])
  })

  it('finds the factor between gains of one form, by the largest of them', () => {
    const gains = { kp: 2, ki: 0, kd: -5 }
    expect(factorBetween(gains, scaleGains(gains, 3.5))).toBeCloseTo(3.5, 14)
    expect(factorBetween({ k: 4, zero: -1, pole: -10 }, { k: 2, zero: -3, pole: -30 })).toBe(0.5)
    expect(factorBetween({ k: 0 }, { k: 2 })).toBeNull()
    expect(factorBetween({ k: 1 }, { k: -2 })).toBeNull()
    expect(factorBetween({ k: 1 }, { kp: 2, kd: 1 })).toBeNull()
  })
})
