import { distance, type Complex } from './complex'
import { fromRoots, leading, scale, type Polynomial } from './polynomial'
import { byPlace } from './roots'

export interface RepeatedRoot {
  place: Complex
  multiplicity: number
}

/** Relative widths at which clusters are tried: an m-fold root of rounded coefficients spreads about eps^(1/m). */
const widths = [1e-12, 1e-9, 1e-8, 1e-7, 1e-6, 1e-5, 1e-4, 1e-3, 1e-2, 0.03]

/**
 * Distinct roots with multiplicities: clusters are taken for one repeated root where the polynomial cannot tell the difference, that is
 * where putting all of a cluster at its mean changes every coefficient by rounding alone.
 * @param found all roots of p, conjugates exact (as from `roots`)
 */
export function gatherRepeated(p: Polynomial, found: readonly Complex[]): RepeatedRoot[] {
  let best = cluster(found, 0)
  let count = best.length
  for (const width of widths) {
    const candidate = cluster(found, width)
    if (candidate.length === count) continue
    count = candidate.length
    if (explains(p, candidate)) best = candidate
  }
  return best.sort((a, b) => byPlace(a.place, b.place))
}

/** Each distinct root as often as it counts. */
export function repeat(distinct: readonly RepeatedRoot[]): Complex[] {
  return distinct.flatMap(({ place, multiplicity }) => Array.from({ length: multiplicity }, () => ({ ...place })))
}

/** Chains of neighbours closer than width times their size, each put at its mean; mirror images stay exact mirrors. */
export function cluster(found: readonly Complex[], width: number): RepeatedRoot[] {
  const rest = [...found]
  const result: RepeatedRoot[] = []
  while (rest.length > 0) {
    const members = [rest.shift()!]
    for (let i = 0; i < members.length; i++) {
      for (let j = rest.length - 1; j >= 0; j--) {
        const size = Math.max(Math.hypot(members[i]!.re, members[i]!.im), Math.hypot(rest[j]!.re, rest[j]!.im))
        if (distance(members[i]!, rest[j]!) <= width * size) members.push(...rest.splice(j, 1))
      }
    }
    result.push({ place: meanOf(members), multiplicity: members.length })
  }
  return mirrored(result)
}

function meanOf(members: Complex[]): Complex {
  if (members.length === 1) return { ...members[0]! }
  const re = members.reduce((sum, root) => sum + root.re, 0) / members.length
  const above = members.filter(root => root.im > 0).length
  const below = members.filter(root => root.im < 0).length
  // A cluster that straddles the axis is its own mirror image.
  return { re, im: above > 0 && below > 0 ? 0 : members.reduce((sum, root) => sum + root.im, 0) / members.length }
}

/** Sums in another order differ in the last digit: the lower clusters are rewritten as mirrors of the upper ones. */
function mirrored(clusters: RepeatedRoot[]): RepeatedRoot[] {
  return clusters.filter(({ place }) => place.im >= 0).flatMap(({ place, multiplicity }) => place.im === 0
    ? [{ place, multiplicity }]
    : [{ place, multiplicity }, { place: { re: place.re, im: -place.im }, multiplicity }])
}

function explains(p: Polynomial, candidate: RepeatedRoot[]): boolean {
  const all = repeat(candidate)
  const rebuilt = scale(fromRoots(all), leading(p))
  const sizes = fromRoots(all.map(root => ({ re: -Math.hypot(root.re, root.im), im: 0 })), Math.abs(leading(p)))
  const first = p.length - rebuilt.length
  const tolerance = 64 * all.length * 2 ** -53
  return rebuilt.every((coefficient, i) => Math.abs(coefficient - p[first + i]!) <= tolerance * sizes[i]!)
}
