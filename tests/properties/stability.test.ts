/** The intervals of stable gain against Routh's criterion in exact arithmetic. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { analyzeLoop } from '#shared/control/analyze'
import { arbitraryLoop } from '../helpers/arbitrary-loop'
import { holds } from '../helpers/property'
import { exactCharacteristic, isHurwitz } from '../helpers/routh'

/** e^-7 to e^7. */
const gains = fc.array(fc.noShrink(fc.integer({ min: -700, max: 700 })).map(n => Math.exp(n / 100)), { minLength: 10, maxLength: 10 })

describe('the intervals of stable gain', () => {
  it.each([[1, 4, 250], [5, 8, 120], [12, 12, 25]])('are those of Routh for orders %i to %i, close to their ends too', (from, to, runs) => {
    let [stable, unstable] = [0, 0]
    holds(20 + from, runs, [arbitraryLoop(from, to), gains], (plant, drawn) => {
      const { stableGain } = analyzeLoop({ plant, rateFeedback: 0 }, { form: 'gain' })
      const ends = stableGain.flat().filter((end): end is number => end !== null && end > 0)
      const close = ends.flatMap(end => [end * (1 - 1e-8), end * (1 + 1e-8)])
      for (const k of [...drawn, ...close].filter(k => ends.every(end => Math.abs(k / end - 1) > 1e-9))) {
        const inside = stableGain.some(([a, b]) => k > a && (b === null || k < b))
        expect(isHurwitz(exactCharacteristic(plant.denominator, k, plant.numerator)), `K = ${k}`).toBe(inside)
        if (inside) stable++
        else unstable++
      }
    })
    expect(stable).toBeGreaterThan(runs / 4)
    expect(unstable).toBeGreaterThan(runs / 4)
  })
})

describe('the witness itself', () => {
  it('knows the textbook cases (N. S. Nise, "Control Systems Engineering", chapter 6, from memory)', () => {
    const whole = (...coefficients: number[]) => coefficients.map(BigInt)
    expect(isHurwitz(whole(1, 10, 31, 1030))).toBe(false)
    expect(isHurwitz(whole(1, 10, 31, 309))).toBe(true)
    // On the border: a pair on the axis, a root at the origin.
    expect(isHurwitz(whole(1, 10, 31, 310))).toBe(false)
    expect(isHurwitz(whole(1, 3, 2, 0))).toBe(false)
    expect(isHurwitz(whole(-2, -3, -1))).toBe(true)
    expect(isHurwitz(whole(1, 2, 3, 6, 5, 3))).toBe(false)
    expect(exactCharacteristic([1, 0.5], 3, [0.25])).toEqual(whole(4, 5))
  })
})
