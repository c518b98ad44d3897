import { describe, expect, it } from 'vitest'
import * as complex from '#shared/numerics/complex'
import { evaluateCompensated, evaluateComplexCompensated } from '#shared/numerics/compensated'
import { findRoot } from '#shared/numerics/find-root'
import { seededRandom } from '../../helpers/random'

describe('complex', () => {
  it('keeps the field identities on random input', () => {
    const random = seededRandom(11)
    for (let round = 0; round < 200; round++) {
      const a = { re: random() - 0.5, im: random() - 0.5 }
      const b = { re: random() - 0.5, im: random() - 0.5 }
      const [root, size, angle] = [complex.sqrt(a), complex.abs(a), complex.arg(a)]
      expect(complex.distance(complex.multiply(complex.divide(a, b), b), a)).toBeLessThan(1e-14)
      expect(complex.distance(complex.multiply(root, root), a)).toBeLessThan(1e-15)
      expect(complex.distance({ re: size * Math.cos(angle), im: size * Math.sin(angle) }, a)).toBeLessThan(1e-15)
    }
  })

  it('divides where the naive formula overflows', () => {
    const quotient = complex.divide({ re: 1e300, im: 1e300 }, { re: 2e300, im: 2e300 })
    expect(quotient).toEqual({ re: 0.5, im: 0 })
  })

  it('gives a negative real number the angle +pi, also with a negative zero', () => {
    expect(complex.arg({ re: -1, im: -0 })).toBe(Math.PI)
    expect(complex.sqrt({ re: -4, im: 0 })).toEqual({ re: 0, im: 2 })
  })
})

describe('compensated evaluation', () => {
  it('sees what plain arithmetic loses: (s - 1)^7 near 1', () => {
    const p = [1, -7, 21, -35, 35, -21, 7, -1]
    const x = 1 + 2 ** -6
    expect(evaluateCompensated(p, x)).toBe(2 ** -42)
    const out = new Float64Array(2)
    evaluateComplexCompensated(p, 1, 2 ** -6, out) // (j 2^-6)^7 = -j 2^-42
    expect(out[0]).toBeCloseTo(0, 25)
    expect(out[1]! / 2 ** -42).toBeCloseTo(-1, 12)
  })
})

describe('findRoot', () => {
  it('finds roots to the last digits', () => {
    expect(findRoot(x => x * x - 2, 0, 2)).toBeCloseTo(Math.SQRT2, 15)
    expect(findRoot(x => Math.cos(x) - x, 0, 1)).toBeCloseTo(0.7390851332151607, 15)
    expect(findRoot(x => Math.exp(x) - 1e-300, -1000, 0)).toBeCloseTo(-300 * Math.LN10, 10)
    expect(findRoot(x => x ** 9, -1, 2)).toBeCloseTo(0, 15)
    expect(findRoot(x => x, 0, 5)).toBe(0)
  })

  it('refuses a bracket without a change of sign', () => {
    expect(() => findRoot(x => x * x + 1, -1, 1)).toThrow(RangeError)
    expect(() => findRoot(() => NaN, -1, 1)).toThrow(RangeError)
  })
})
