import { abs, divide, multiply, scale, subtract, zero, type Complex } from '../numerics/complex'
import { cluster, repeat, type RepeatedRoot } from '../numerics/multiple-roots'

/** A closed-loop root, with its conjugate where im > 0, as often as it counts. */
export interface Mode {
  /** rad/s, im >= 0. */
  place: Complex
  multiplicity: number
  /** Its part of the transient after a step, 0..1; null where the response does not come to rest. */
  share: number | null
}

/** Roots closer than this, relative to their size, are one repeated root: weights of their own would be large, opposite and without meaning. */
const closeness = 1e-3

/**
 * The modes of a step response with the share of each: its weight over the sum of all weights. The weight of a simple root is the size of its
 * residue in T(s)/s, twice that for a pair; an m-fold root has terms t^j e^(pt)/j!, j < m, each of which weighs as much as it ever grows to.
 * @param zeros of the same transfer function, whose gain has no bearing on the shares
 * @param stable whether every root dies out; shares exist only then
 */
export function modesOf(poles: readonly Complex[], zeros: readonly Complex[], stable: boolean): Mode[] {
  const groups = areApart(poles) ? poles.map(place => ({ place, multiplicity: 1 })) : cluster(poles, closeness)
  const upper = groups.filter(({ place }) => place.im >= 0)
  if (!stable) return upper.map(group => ({ ...group, share: null }))
  // Measured by the mean size of the roots, products of many of them stay within the range of numbers.
  const unit = 1 / Math.exp(poles.reduce((sum, pole) => sum + Math.log(abs(pole)), 0) / poles.length)
  const weights = upper.map((group) => {
    const weight = group.multiplicity === 1 ? residueSize(group, groups, zeros, unit) : weightOf(partialFraction(group, groups, zeros, unit), -group.place.re * unit)
    return group.place.im > 0 ? 2 * weight : weight
  })
  const total = weights.reduce((sum, weight) => sum + weight, 0)
  return upper.map((group, i) => {
    const share = weights[i]! / total
    return { ...group, share: Number.isFinite(share) ? share : null }
  })
}

/** Whether no two of them are as good as repeated, which is the rule; the plain loop spares the search for chains of neighbours. */
function areApart(poles: readonly Complex[]): boolean {
  for (let i = 0; i < poles.length; i++) {
    const { re, im } = poles[i]!
    const nearest = closeness * closeness * (re * re + im * im)
    for (let j = 0; j < poles.length; j++) {
      const x = re - poles[j]!.re
      const y = im - poles[j]!.im
      if (j !== i && x * x + y * y <= nearest) return false
    }
  }
  return true
}

/** |residue| at a simple root: distances to the zeros over those to the other roots and to the origin, where the step has its pole. */
function residueSize(own: RepeatedRoot, roots: readonly RepeatedRoot[], zeros: readonly Complex[], unit: number): number {
  const { re, im } = own.place
  const distanceTo = (place: Complex) => unit * Math.sqrt((place.re - re) * (place.re - re) + (place.im - im) * (place.im - im))
  let size = 1 / distanceTo(zero)
  // In turn, so that the product stays within the range of numbers.
  for (let i = 0; i < Math.max(roots.length, zeros.length); i++) {
    if (i < roots.length && roots[i] !== own) size /= distanceTo(roots[i]!.place) ** roots[i]!.multiplicity
    if (i < zeros.length) size *= distanceTo(zeros[i]!)
  }
  return size
}

/** What multiplies (s - p)^-m, (s - p)^-(m - 1), ..., (s - p)^-1 at an m-fold root: the power series there of zeros over the other roots. */
function partialFraction(own: RepeatedRoot, roots: readonly RepeatedRoot[], zeros: readonly Complex[], unit: number): Complex[] {
  const { place: p, multiplicity: m } = own
  const others = [zero, ...repeat(roots.filter(root => root !== own))]
  let series = Array.from({ length: m }, (_, k) => k === 0 ? { re: 1, im: 0 } : zero)
  for (let i = 0; i < Math.max(others.length, zeros.length); i++) {
    if (i < others.length) series = divided(series, scale(subtract(p, others[i]!), unit))
    if (i < zeros.length) series = multiplied(series, scale(subtract(p, zeros[i]!), unit))
  }
  return series
}

/** A power series times (d + x). */
function multiplied(series: readonly Complex[], d: Complex): Complex[] {
  return series.map((c, k) => {
    const { re, im } = multiply(c, d)
    const { re: beforeRe, im: beforeIm } = series[k - 1] ?? zero
    return { re: re + beforeRe, im: im + beforeIm }
  })
}

/** A power series over (d + x). */
function divided(series: readonly Complex[], d: Complex): Complex[] {
  let before = zero
  return series.map(c => before = divide(subtract(c, before), d))
}

/** The sum of |c| max_t (t^j e^(-decay t)/j!) over the terms of a root; the last of the series belongs to j = 0. */
function weightOf(series: readonly Complex[], decay: number): number {
  let factorial = 1
  return [...series].reverse().reduce((sum, c, j) => {
    factorial *= Math.max(1, j)
    return sum + abs(c) * (j === 0 ? 1 : (j / (Math.E * decay)) ** j / factorial)
  }, 0)
}
