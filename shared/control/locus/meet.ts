import * as complex from '../../numerics/complex'
import type { Complex } from '../../numerics/complex'
import * as polynomial from '../../numerics/polynomial'
import { roots } from '../../numerics/roots'
import { delayedRoots } from '../delay/delayed-roots'
import type { FactoredLoop } from './factored-loop'
import { farGainStep, gainStepOf, type FarStation, type Launched, type Station } from './launch'
import { march, type Branch, type Mover } from './march'
import { spreadFactor, type ScaledLoop } from './scaled-loop'
import type { Node } from './trace-branches'

/** The last piece to a meeting is no longer than this (extents). */
const nearby = 0.03
/** Largest departure from the local expansion (z - z0)^m = c (k - k0) at which the last piece is straight enough. */
const bend = 0.3
const attempts = 30

/**
 * Carries the roots up to a meeting and onto it.
 * @param room the last piece begins no further than this below the node's gain
 * @returns where all roots stand at the node's gain; the node is recorded in every branch
 */
export function meet(scaled: ScaledLoop, loop: FactoredLoop, { movers, k }: Launched, node: Node, room: number): Station[] {
  const bystanders = rootsBeside(scaled, loop, node)
  const before = Math.min(room, ...node.meetings.map(({ place, multiplicity }) => {
    const mirror = place.im > 0 ? [complex.conjugate(place)] : []
    const others = node.meetings.filter(other => other.place !== place).map(other => other.place)
    return gainStepOf(scaled, node.k, { place, count: multiplicity }, [...bystanders, ...mirror, ...others])
  }))
  let edge = Math.max(node.k - before, k)
  let rest = march(scaled, movers, k, edge)
  for (let attempt = 0; attempt < attempts && scaled.allowance.moves > 0 && !(allNear(rest, node) && allStraight(scaled, rest, node, edge)); attempt++) {
    const closer = node.k - (node.k - edge) / 4
    if (closer >= node.k) break
    rest = march(scaled, rest, edge, closer)
    edge = closer
  }
  const stations = node.meetings.map(({ place, multiplicity }) => gather(rest, place, multiplicity))
  for (const station of stations) touch(station, node.k)
  return [...stations, ...march(scaled, rest, edge, node.k).map(standing)]
}

/**
 * Carries the roots up to the gain at which one (or more) passes through infinity, and the others past it. The branches that go out end;
 * new ones are begun for the far side.
 */
export function passInfinity(scaled: ScaledLoop, loop: FactoredLoop, { movers, k }: Launched, node: Node, room: number, branches: Branch[]):
{ stations: Station[], far: FarStation } {
  const far = farStationOf(scaled, loop)
  const edge = Math.max(node.k - Math.min(room, farGainStep(far)), k)
  const rest = march(scaled, movers, k, edge)
  rest.sort((a, b) => Math.hypot(b.re, b.im) - Math.hypot(a.re, a.im))
  for (let gone = 0; gone < far.count && rest.length > 0;) gone += rest.shift()!.mirror === null ? 1 : 2
  branches.push(...far.branches)
  return { stations: march(scaled, rest, edge, node.k).map(standing), far }
}

/** D - (d/n) N loses `count` powers of s; the first one left tells how fast the roots come in from infinity. */
function farStationOf(scaled: ScaledLoop, { numerator, denominator }: FactoredLoop): FarStation {
  const n = polynomial.leading(numerator)
  const d = polynomial.leading(denominator)
  const left = polynomial.productDifference(denominator, [n], numerator, [d])
  const count = polynomial.degree(denominator) - polynomial.degree(left)
  return {
    coefficient: polynomial.leading(left) / n / d / scaled.extent ** count,
    count,
    branches: Array.from({ length: count }, () => ({ points: [] })),
  }
}

/** The closed-loop roots at a node's gain that take no part in its meetings, in scaled units. */
function rootsBeside(scaled: ScaledLoop, loop: FactoredLoop, node: Node): Complex[] {
  const all = rootsAt(loop, node.k * scaled.gainUnit).map(root => complex.scale(root, 1 / scaled.extent))
  for (const { place, multiplicity } of node.meetings) {
    for (const meeting of place.im > 0 ? [place, complex.conjugate(place)] : [place]) {
      all.sort((a, b) => complex.distance(a, meeting) - complex.distance(b, meeting))
      all.splice(0, multiplicity)
    }
  }
  return all
}

function rootsAt({ numerator, denominator, deadTime }: FactoredLoop, gain: number): Complex[] {
  if (deadTime > 0) return delayedRoots({ numerator: polynomial.scale(numerator, gain), denominator, deadTime }).poles
  return roots(polynomial.combine(1, denominator, gain, numerator))
}

/** Whether every meeting has its roots about it: where the local expansion misjudges the way, they may still be far. */
function allNear(movers: Mover[], node: Node): boolean {
  return node.meetings.every(({ place, multiplicity }) => {
    const near = movers.filter(({ re, im }) => Math.hypot(re - place.re, im - place.im) <= nearby)
    return near.reduce((count, { mirror }) => count + (mirror !== null && place.im === 0 ? 2 : 1), 0) >= multiplicity
  })
}

/** Whether the roots about every meeting of two come to it as the local expansion has them come. */
function allStraight(scaled: ScaledLoop, movers: Mover[], node: Node, k: number): boolean {
  return node.meetings.filter(({ multiplicity }) => multiplicity === 2).every(({ place }) => {
    const expected = complex.scale(spreadFactor(scaled, node.k, place, 2), k - node.k)
    const gaps = movers.map(mover => complex.subtract(mover, place)).sort((a, b) => complex.abs(a) - complex.abs(b))
    const nearest = gaps[0]
    return nearest === undefined || complex.distance(complex.multiply(nearest, nearest), expected) <= bend * complex.abs(expected)
  })
}

/** Takes the movers that come to a meeting (the nearest ones) out of the list. */
function gather(movers: Mover[], place: Complex, count: number): Station {
  const station: Station = { place, count, branches: [], mirrors: [] }
  movers.sort((a, b) => Math.hypot(a.re - place.re, a.im - place.im) - Math.hypot(b.re - place.re, b.im - place.im))
  for (let i = 0; i < movers.length && station.branches.length < count;) {
    const { branch, mirror } = movers[i]!
    const taken = mirror === null || place.im > 0 ? 1 : 2
    if (station.branches.length + taken > count || (mirror === null && place.im > 0)) {
      i++
      continue
    }
    station.branches.push(branch)
    if (mirror !== null) (place.im > 0 ? station.mirrors : station.branches).push(mirror)
    movers.splice(i, 1)
  }
  return station
}

/** A root that takes no part is a station of its own at the node's gain. */
function standing({ re, im, branch, mirror }: Mover): Station {
  return { place: { re, im }, count: 1, branches: [branch], mirrors: mirror === null ? [] : [mirror] }
}

function touch({ place, branches, mirrors }: Station, k: number): void {
  for (const branch of branches) branch.points.push({ re: place.re, im: place.im, k })
  for (const branch of mirrors) branch.points.push({ re: place.re, im: -place.im, k })
}
