import { describe, expect, it } from 'vitest'
import { distance, type Complex } from '#shared/numerics/complex'
import { fromRoots } from '#shared/numerics/polynomial'
import { realRoots, roots } from '#shared/numerics/roots'
import { seededRandom } from '../../helpers/random'

/** Simple roots: the accuracy that docs/method.md asks for. */
const simpleTolerance = 1e-10

/** Largest distance from a wanted root to the nearest found one that is not taken yet, relative to its size. */
function worstDeviation(found: Complex[], wanted: Complex[]): number {
  const rest = [...found]
  return Math.max(0, ...wanted.map((root) => {
    let nearest = 0
    rest.forEach((other, i) => {
      if (distance(other, root) < distance(rest[nearest]!, root)) nearest = i
    })
    const [match] = rest.splice(nearest, 1)
    return distance(match!, root) / Math.max(Math.hypot(root.re, root.im), 1e-300)
  }))
}

function randomRoots(random: () => number, count: number): Complex[] {
  const wanted: Complex[] = []
  while (wanted.length < count) {
    const re = -Math.exp(6 * random() - 3)
    if (count - wanted.length >= 2 && random() < 0.6) {
      const im = Math.exp(6 * random() - 3)
      wanted.push({ re, im }, { re, im: -im })
    }
    else wanted.push({ re, im: 0 })
  }
  return wanted
}

describe('roots', () => {
  it('gives none for a constant and refuses what has no meaning', () => {
    expect(roots([5])).toEqual([])
    expect(roots([0, 0, 5])).toEqual([])
    expect(() => roots([])).toThrow(RangeError)
    expect(() => roots([0, 0])).toThrow(/zero polynomial/)
    expect(() => roots([1, NaN, 2])).toThrow(/finite/)
    expect(() => roots([Infinity, 1])).toThrow(/finite/)
  })

  it('ignores leading zeros and deflates roots at the origin exactly', () => {
    expect(roots([0, 0, 1, 2])).toEqual([{ re: -2, im: 0 }])
    expect(roots([1, 3, 2, 0, 0])).toEqual([{ re: -2, im: 0 }, { re: -1, im: 0 }, { re: 0, im: 0 }, { re: 0, im: 0 }])
    expect(roots([7, 0, 0, 0])).toEqual(new Array(3).fill({ re: 0, im: 0 }))
  })

  it('orders by real part, upper root of a pair first', () => {
    expect(roots([1, 1, 4, 4])).toEqual([{ re: -1, im: 0 }, { re: 0, im: 2 }, { re: 0, im: -2 }])
    expect(roots([1, 6, 11, 6]).map(root => root.re)).toEqual([-3, -2, -1])
  })

  it('solves quadratics without cancellation', () => {
    expect(realRoots([1, -1e8, 1])[0]).toBeCloseTo(1e-8, 23)
    expect(roots([1, 2, 1])).toEqual([{ re: -1, im: 0 }, { re: -1, im: 0 }])
    expect(roots([4, 0, 1])).toEqual([{ re: 0, im: 0.5 }, { re: 0, im: -0.5 }])
  })

  it.each([3, 6, 12])('finds simple roots of random polynomials of degree %i', (degree) => {
    const random = seededRandom(degree)
    for (let round = 0; round < 200; round++) {
      const wanted = randomRoots(random, degree)
      const p = fromRoots(wanted)
      const found = roots(p)
      expect(found).toHaveLength(degree)
      // The coefficients are rounded, so the wanted roots are compared where rounding moves them little: by the residual otherwise.
      for (const root of found) expect(relativeResidual(p, root)).toBeLessThan(1e-14)
      if (wellSeparated(wanted)) expect(worstDeviation(found, wanted)).toBeLessThan(degree > 6 ? 1e-6 : simpleTolerance)
    }
  })

  it('finds the integer roots of (s+1)...(s+10) as the coefficients, exact integers, define them', () => {
    const wanted = Array.from({ length: 10 }, (_, i) => ({ re: -10 + i, im: 0 }))
    expect(roots(fromRoots(wanted))).toEqual(wanted)
  })

  it('finds the roots of unity at degree 40', () => {
    const found = roots([1, ...new Array<number>(39).fill(0), -1])
    const wanted = Array.from({ length: 40 }, (_, k) => ({ re: Math.cos(Math.PI * k / 20), im: Math.sin(Math.PI * k / 20) }))
    expect(worstDeviation(found, wanted)).toBeLessThan(1e-15)
  })

  it('spans sizes from 1e-6 to 1e6 at degree 13 without overflow or loss', () => {
    const wanted = Array.from({ length: 13 }, (_, i) => ({ re: -(10 ** (i - 6)), im: 0 }))
    expect(worstDeviation(roots(fromRoots(wanted)), wanted)).toBeLessThan(1e-13)
  })

  it('stays finite for degree 40 over 24 decades', () => {
    const wanted = Array.from({ length: 40 }, (_, i) => ({ re: -(10 ** ((i - 20) * 0.3)), im: 0 }))
    expect(worstDeviation(roots(fromRoots(wanted)), wanted)).toBeLessThan(1e-10)
  })

  it('does not depend on the scale of coefficients or variable', () => {
    const p = [1, 4.1, 9.3, 11.2, 5.7]
    const found = roots(p)
    expect(roots(p.map(c => c * 2 ** 900))).toEqual(found)
    const stretched = roots(p.map((c, i) => c * 1024 ** i))
    stretched.forEach((root, i) => expect(distance(root, { re: found[i]!.re * 1024, im: found[i]!.im * 1024 })).toBeLessThan(1e-11))
  })

  it('keeps conjugates exact and real roots real, deterministically', () => {
    const random = seededRandom(77)
    for (let round = 0; round < 300; round++) {
      const p = Array.from({ length: 4 + Math.floor(9 * random()) }, () => 2 * random() - 1)
      const found = roots(p)
      expect(roots(p)).toEqual(found)
      expect(found).toHaveLength(p.length - 1)
      const upper = found.filter(root => root.im > 0)
      const lower = found.filter(root => root.im < 0)
      expect(lower).toHaveLength(upper.length)
      for (const root of upper) expect(lower).toContainEqual({ re: root.re, im: -root.im })
      for (const root of found) expect(relativeResidual(p, root)).toBeLessThan(1e-14)
    }
  })

  it('tells a close pair apart', () => {
    // (s + 1)^2 + 2^-52, coefficients exact: the pair stands 2^-26 off the axis.
    const found = roots([1, 2, 1 + 2 ** -52])
    expect(found[0]!.im).toBeCloseTo(2 ** -26, 20)
    const cubic = roots([1, 4, 5 + 2 ** -50, 2 + 2 ** -49]) // times (s + 2)
    expect(cubic[1]!.im / 2 ** -25).toBeCloseTo(1, 6)
    expect(cubic[2]).toEqual({ re: cubic[1]!.re, im: -cubic[1]!.im })
  })

  it.each([[2, 1e-7], [3, 1e-5], [4, 1e-3], [6, 0.02]])('degrades gracefully at a root of multiplicity %i', (multiplicity, tolerance) => {
    const wanted = [...new Array<Complex>(multiplicity).fill({ re: -1.7, im: 0 }), { re: -4, im: 3 }, { re: -4, im: -3 }]
    expect(worstDeviation(roots(fromRoots(wanted)), wanted)).toBeLessThan(tolerance)
  })

  it('finds multiple complex pairs', () => {
    const wanted = [{ re: -1, im: 2 }, { re: -1, im: -2 }, { re: -1, im: 2 }, { re: -1, im: -2 }]
    const found = roots(fromRoots(wanted))
    expect(worstDeviation(found, wanted)).toBeLessThan(1e-7)
    expect(found.filter(root => root.im > 0)).toHaveLength(2)
  })

  it('parts forty roots that all but one last coefficient put into one place', () => {
    // (s + 1)^40 + 1/2, its coefficients below 2^53 and so exact: the roots lie evenly on a circle about -1.
    const p = fromRoots(Array.from({ length: 40 }, () => ({ re: -1, im: 0 })))
    p[40]! += 0.5
    const radius = 0.5 ** (1 / 40)
    const wanted = Array.from({ length: 40 }, (_, k) => Math.PI * (2 * k + 1) / 40).map(angle => ({ re: -1 + radius * Math.cos(angle), im: radius * Math.sin(angle) }))
    expect(worstDeviation(roots(p), wanted)).toBeLessThan(1e-13)
  })

  it('never throws or loses a root over hostile coefficients', () => {
    const random = seededRandom(5)
    for (let round = 0; round < 300; round++) {
      const degree = 1 + Math.floor(40 * random())
      const p = Array.from({ length: degree + 1 }, () => random() < 0.3 ? 0 : (random() - 0.5) * 10 ** (40 * random() - 20))
      p[0] = 1
      const found = roots(p)
      expect(found).toHaveLength(degree)
      expect(found.every(root => Number.isFinite(root.re) && Number.isFinite(root.im))).toBe(true)
    }
  })
})

/** |p(s)| against the rounding it may carry. */
function relativeResidual(p: number[], s: Complex): number {
  let re = 0
  let im = 0
  let bound = 0
  for (const c of p) {
    [re, im] = [re * s.re - im * s.im + c, re * s.im + im * s.re]
    bound = bound * Math.hypot(s.re, s.im) + Math.abs(c)
  }
  return Math.hypot(re, im) / bound
}

function wellSeparated(wanted: Complex[]): boolean {
  return wanted.every((a, i) => wanted.every((b, j) => i === j || distance(a, b) > 0.1 * Math.hypot(a.re, a.im)))
}
