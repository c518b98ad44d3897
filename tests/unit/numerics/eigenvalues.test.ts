import { describe, expect, it } from 'vitest'
import { eigenvalues } from '#shared/numerics/eigenvalues'
import { byPlace, roots } from '#shared/numerics/roots'
import { seededRandom } from '../../helpers/random'

const sorted = (a: number[][]) => eigenvalues(Float64Array.from(a.flat()), a.length).sort(byPlace)

describe('eigenvalues', () => {
  it('finds those of triangular, cyclic and rotating matrices', () => {
    expect(sorted([[3, 1, 4], [0, -1, 5], [0, 0, 2]])).toEqual([{ re: -1, im: 0 }, { re: 2, im: 0 }, { re: 3, im: 0 }])
    // A cyclic permutation stalls the plain iteration: its eigenvalues are the roots of unity.
    const cyclic = sorted([[0, 0, 0, 1], [1, 0, 0, 0], [0, 1, 0, 0], [0, 0, 1, 0]])
    const unity = [[-1, 0], [0, 1], [0, -1], [1, 0]].sort((a, b) => a[0]! - b[0]!)
    cyclic.forEach((value, i) => {
      expect(value.re).toBeCloseTo(unity[i]![0]!, 13)
      expect(Math.abs(value.im)).toBeCloseTo(Math.abs(unity[i]![1]!), 13)
    })
    expect(sorted([[0.8, -0.6], [0.6, 0.8]])).toEqual([{ re: 0.8, im: expect.closeTo(0.6, 14) }, { re: 0.8, im: expect.closeTo(-0.6, 14) }])
  })

  it('agrees with the roots of a polynomial on its companion matrix, seeded', () => {
    const random = seededRandom(20261201)
    for (let n = 2; n <= 24; n++) {
      const p = [1, ...Array.from({ length: n }, () => 2 * random() - 1)]
      const a = Array.from({ length: n }, (_, i) => Array.from({ length: n }, (_, j) => i === 0 ? -p[j + 1]! : Number(i === j + 1)))
      const expected = roots(p)
      const found = sorted(a)
      for (const value of expected) expect(Math.min(...found.map(other => Math.hypot(other.re - value.re, other.im - value.im)))).toBeLessThan(1e-11)
    }
  })

  it('is untouched by badly scaled rows, and empty for an empty matrix', () => {
    const [low, high] = sorted([[1, 1e12], [2e-12, 3]])
    expect(low!.re).toBeCloseTo(2 - Math.sqrt(3), 13)
    expect(high!.re).toBeCloseTo(2 + Math.sqrt(3), 13)
    expect(eigenvalues(new Float64Array(0), 0)).toEqual([])
    expect(() => eigenvalues(Float64Array.from([NaN]), 1)).toThrow(RangeError)
  })
})
