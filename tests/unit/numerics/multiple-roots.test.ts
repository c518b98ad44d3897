import { describe, expect, it } from 'vitest'
import { cluster, gatherRepeated, repeat } from '#shared/numerics/multiple-roots'
import { fromRoots, productDifference } from '#shared/numerics/polynomial'
import { roots } from '#shared/numerics/roots'

const gather = (p: number[]) => gatherRepeated(p, roots(p))

describe('gatherRepeated', () => {
  it.each([2, 3, 4, 5])('sees one root of multiplicity %i in rounded coefficients', (multiplicity) => {
    const p = fromRoots([...Array.from({ length: multiplicity }, () => ({ re: -0.3, im: 0 })), { re: -2, im: 1 }, { re: -2, im: -1 }], 7)
    const found = gather(p)
    expect(found.map(each => each.multiplicity).sort()).toEqual([1, 1, multiplicity])
    const repeated = found.find(each => each.multiplicity === multiplicity)!
    expect(repeated.place.im).toBe(0)
    expect(repeated.place.re).toBeCloseTo(-0.3, 10)
  })

  it('sees two double roots at once, and double pairs as exact mirrors', () => {
    expect(gather(fromRoots([-1.1, -1.1, -3.7, -3.7].map(re => ({ re, im: 0 })))).map(({ multiplicity }) => multiplicity)).toEqual([2, 2])
    const pairs = gather(fromRoots([{ re: -1, im: 2 }, { re: -1, im: -2 }, { re: -1, im: 2 }, { re: -1, im: -2 }]))
    expect(pairs).toHaveLength(2)
    expect(pairs[1]!.place).toEqual({ re: pairs[0]!.place.re, im: -pairs[0]!.place.im })
    expect(repeat(pairs)).toHaveLength(4)
  })

  it('leaves roots apart that the coefficients tell apart', () => {
    expect(gather(fromRoots([{ re: -1, im: 0 }, { re: -1.00001, im: 0 }]))).toHaveLength(2)
    expect(gather([1, 2, 1 + 1e-10])).toHaveLength(2)
    expect(gather([1, 6, 11, 6]).map(({ place }) => place.re)).toEqual([-3, -2, -1])
    expect(gather([5])).toEqual([])
  })

  it('chains neighbours and keeps a cluster across the axis on it', () => {
    const found = cluster([{ re: -1, im: 1e-7 }, { re: -1, im: -1e-7 }, { re: -1 + 1e-7, im: 0 }], 1e-6)
    expect(found).toHaveLength(1)
    expect(found[0]).toMatchObject({ multiplicity: 3, place: { im: 0 } })
  })
})

describe('productDifference', () => {
  it('makes leading coefficients that are rounding alone exactly zero', () => {
    expect(productDifference([0.1, 1], [0.3, 2], [0.3, 1], [0.1, 5])).toHaveLength(2)
    expect(productDifference([1, 2], [1, 3], [1], [4, 5, 7])).toEqual([-3, 0, -1])
    expect(productDifference([1], [2], [2], [1])).toEqual([0])
  })
})
