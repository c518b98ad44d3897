import { describe, expect, it } from 'vitest'
import * as polynomial from '#shared/numerics/polynomial'
import { seededRandom } from '../../helpers/random'

describe('polynomial', () => {
  it('trims leading zeros, keeps the zero polynomial as [0]', () => {
    expect(polynomial.trim([0, 0, 1, 0])).toEqual([1, 0])
    expect(polynomial.trim([0, 0])).toEqual([0])
    expect(polynomial.trim([])).toEqual([0])
    expect(polynomial.degree([0, 3, 1])).toBe(1)
    expect(polynomial.degree([])).toBe(-1)
    expect(polynomial.degree([0])).toBe(-1)
    expect(polynomial.rootsAtOrigin([1, 2, 0, 0])).toBe(2)
    expect(polynomial.rootsAtOrigin([0])).toBe(0)
    expect(polynomial.leading([0, -3, 1])).toBe(-3)
    expect(polynomial.coefficientOf([1, 2, 3], 1)).toBe(2)
    expect(polynomial.coefficientOf([1, 2, 3], 7)).toBe(0)
  })

  it('adds, multiplies, differentiates', () => {
    expect(polynomial.add([1, 2], [-1, 0])).toEqual([2])
    expect(polynomial.subtract([1, 2, 3], [3])).toEqual([1, 2, 0])
    expect(polynomial.combine(2, [1, 1], -1, [1, 0, 0])).toEqual([-1, 2, 2])
    expect(polynomial.multiply([1, 1], [1, -1])).toEqual([1, 0, -1])
    expect(polynomial.multiply([1, 1], [0])).toEqual([0])
    expect(polynomial.derivative([2, 3, 4])).toEqual([4, 3])
    expect(polynomial.derivative([4])).toEqual([0])
    expect(polynomial.multiplyByPower([1, 2], 2)).toEqual([1, 2, 0, 0])
    expect(polynomial.scale([1, 2], 0)).toEqual([0])
  })

  it('builds real coefficients from roots and asks for conjugates', () => {
    expect(polynomial.fromRoots([{ re: -1, im: 2 }, { re: -3, im: 0 }, { re: -1, im: -2 }], 2)).toEqual([2, 10, 22, 30])
    expect(polynomial.fromRoots([])).toEqual([1])
    expect(() => polynomial.fromRoots([{ re: 0, im: 1 }])).toThrow(/conjugate/)
    expect(() => polynomial.fromRoots([{ re: 0, im: -1 }])).toThrow(/conjugate/)
  })

  it('splits along a ray and along the imaginary axis', () => {
    expect(polynomial.alongRay([1, 2, 3, 4], { re: 0, im: 1 })).toEqual({ re: [-2, 0, 4], im: [-1, 0, 3, 0] })
    const random = seededRandom(3)
    for (let round = 0; round < 50; round++) {
      const p = Array.from({ length: 6 }, () => random() - 0.5)
      const angle = Math.PI * random()
      const r = 2 * random()
      const direction = { re: Math.cos(angle), im: Math.sin(angle) }
      const split = polynomial.alongRay(p, direction)
      const direct = polynomial.evaluateComplex(p, { re: r * direction.re, im: r * direction.im })
      expect(polynomial.evaluate(split.re, r)).toBeCloseTo(direct.re, 12)
      expect(polynomial.evaluate(split.im, r)).toBeCloseTo(direct.im, 12)
    }
  })

  it('never changes its arguments', () => {
    const p = Object.freeze([1, 2, 3])
    polynomial.add(p, p)
    polynomial.multiply(p, p)
    polynomial.derivative(p)
    polynomial.alongRay(p, { re: 0, im: 1 })
    expect(p).toEqual([1, 2, 3])
  })
})
