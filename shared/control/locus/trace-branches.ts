import * as complex from '../../numerics/complex'
import type { RepeatedRoot } from '../../numerics/multiple-roots'
import type { LoopAnalysis } from '../types'
import type { Breakaway } from './breakaways'
import type { FactoredLoop } from './factored-loop'
import { entrances } from './entrances'
import { launch, type FarStation, type Station } from './launch'
import { march, record, type Branch } from './march'
import { meet, passInfinity } from './meet'
import { scaleLoop, type ScaledLoop } from './scaled-loop'
import { thin } from './thin'

/** Branches to infinity are followed to this many extents of the figure. */
const outward = 8
/** Branches to a zero are followed to this distance from it, in extents. */
const arrived = 1e-4
/** Meetings whose gains differ by less than this (relative) happen at one node; those that are also this close (extents) are one. */
const sameGain = 1e-11
const samePlace = 2e-3
/** Share of the way between two nodes that the first piece out of a node may take. */
const firstShare = 0.3

/** A gain (scaled) at which roots meet, or at which a root passes through infinity. */
export interface Node {
  k: number
  /** Places (upper half) of roots that enter the drawing here. */
  entering: complex.Complex[]
  /** Places on or above the real axis. */
  meetings: RepeatedRoot[]
  throughInfinity: boolean
}

/**
 * The branches of the root locus, continuous in the gain from the open-loop poles to zeros or out along the asymptotes.
 *
 * The gains at which roots meet are known exactly (breakaways). Between two of them roots are simple and keep apart, so they are carried by prediction and
 * Newton correction under step control; at a meeting branches end and start on the exact point, along the directions of its local expansion. Where a root of
 * a biproper loop passes through infinity its branch ends, and another begins on the far side.
 *
 * The branches that a dead time brings in from the far left begin where they enter the drawing.
 *
 * @param loop without common poles and zeros
 * @param meetings all breakaways of the loop
 * @param beyond the last gain recorded lies well above these
 * @param extent size of the figure (rad/s)
 * @returns points [re, im, gain], the gain rising from 0
 */
export function traceBranches(loop: FactoredLoop, meetings: Breakaway[], beyond: number[], extent: number): LoopAnalysis['branches'] {
  const scaled = scaleLoop(loop, extent)
  const nodes = nodesOf(scaled, meetings)
  const branches: Branch[] = []
  let stations = startAtPoles(loop, extent, branches)
  let far: FarStation | null = null
  let k0 = 0
  for (const node of nodes) {
    const room = firstShare * (node.k - k0)
    const launched = launch(scaled, k0, stations, far, room)
    record(launched.movers, launched.k)
    if (node.throughInfinity) ({ stations, far } = passInfinity(scaled, loop, launched, node, room, branches))
    else ({ stations, far } = { stations: meet(scaled, loop, launched, node, room), far: null })
    stations.push(...enter(node, stations, branches))
    k0 = node.k
  }
  const end = lastGain(scaled, [...nodes.map(node => node.k), ...beyond.map(gain => gain / scaled.gainUnit)])
  const launched = launch(scaled, k0, stations, far, firstShare * (end - k0))
  record(launched.movers, launched.k)
  march(scaled, launched.movers, launched.k, end)
  return branches.map(branch => ({
    points: thin(branch.points, outward)
      .map(({ re, im, k }): [number, number, number] => [re * extent + 0, im * extent + 0, k * scaled.gainUnit]),
  }))
}

function startAtPoles(loop: FactoredLoop, extent: number, branches: Branch[]): Station[] {
  return loop.distinctPoles.filter(({ place }) => place.im >= 0).map(({ place, multiplicity }) => {
    const at = complex.scale(place, 1 / extent)
    const open = (im: number): Branch => ({ points: [{ re: at.re, im, k: 0 }] })
    const own = Array.from({ length: multiplicity }, () => open(at.im))
    const mirrors = at.im > 0 ? own.map(() => open(-at.im)) : []
    branches.push(...own, ...mirrors)
    return { place: at, count: multiplicity, branches: own, mirrors }
  })
}

/** Roots that come in from the far left, but for those that had been in the drawing before and come back. */
function enter({ entering, k }: Node, present: Station[], branches: Branch[]): Station[] {
  const unknown = entering.filter(place => present.every(station => complex.distance(station.place, place) > samePlace))
  return unknown.map((place) => {
    const own: Branch = { points: [{ re: place.re, im: place.im, k }] }
    const mirrors: Branch[] = place.im > 0 ? [{ points: [{ re: place.re, im: -place.im, k }] }] : []
    branches.push(own, ...mirrors)
    return { place, count: 1, branches: [own], mirrors }
  })
}

function nodesOf(scaled: ScaledLoop, meetings: Breakaway[]): Node[] {
  const nodes: Node[] = []
  if (scaled.deadTime === 0 && scaled.poles.length === scaled.zeros.length && scaled.sign < 0) nodes.push({ k: 1, entering: [], meetings: [], throughInfinity: true })
  for (const { point, gain, meeting } of meetings) {
    if (point.im < 0) continue
    const k = gain / scaled.gainUnit
    const place = complex.scale(point, 1 / scaled.extent)
    const node = nodes.find(other => Math.abs(other.k - k) <= sameGain * k)
    const neighbour = node?.meetings.find(other => complex.distance(other.place, place) <= samePlace)
    if (node === undefined) nodes.push({ k, entering: [], meetings: [{ place, multiplicity: meeting }], throughInfinity: false })
    else if (neighbour === undefined) node.meetings.push({ place, multiplicity: meeting })
    // Two meetings one after the other that share a branch, too close to be told apart on the way: one of higher order.
    else neighbour.multiplicity += meeting - 1
  }
  for (const { place, k } of entrances(scaled)) nodes.push({ k, entering: [place], meetings: [], throughInfinity: false })
  return nodes.sort((a, b) => a.k - b.k)
}

/** Far enough for every branch to have gone out or come to its zero, and well above every gain that matters. */
function lastGain({ poles, zeros, deadTime }: ScaledLoop, others: number[]): number {
  const asymptotes = poles.length - zeros.length
  const gains = others.map(k => 4 * k)
  // With a dead time branches go out to the right, where the gain rises as e^(z deadTime): far enough to see where they are bound.
  if (asymptotes > 0) gains.push(deadTime > 0 ? 2 ** asymptotes * Math.exp(Math.min(2 * deadTime, 20)) : (2 * outward) ** asymptotes)
  for (const zero of zeros) {
    const same = zeros.filter(other => other.re === zero.re && other.im === zero.im).length
    const reachOf = (places: complex.Complex[]) => places.reduce((product, place) => product * (complex.distance(place, zero) || 1), 1)
    gains.push(reachOf(poles) / reachOf(zeros) / arrived ** same)
  }
  return Math.min(Math.max(1, ...gains), 1e200)
}
