import * as complex from '../../numerics/complex'
import type { Complex } from '../../numerics/complex'
import type { Branch, Mover } from './march'
import { refine, spreadFactor, type ScaledLoop } from './scaled-loop'

/** A place on or above the real axis where `count` roots stand together at one gain, with the branches that pass through it. */
export interface Station {
  place: Complex
  count: number
  /** `count` branches. */
  branches: Branch[]
  /** Their mirror images, where the place lies above the axis; else empty. */
  mirrors: Branch[]
}

/** Roots that passed through infinity at a gain k0: z^count = coefficient/(k - k0) to first order. */
export interface FarStation {
  coefficient: number
  count: number
  branches: Branch[]
}

export interface Launched {
  movers: Mover[]
  k: number
}

/** Branches that come from infinity are drawn from this far out, in extents. */
const edge = 12
/** How far the first piece out of a meeting reaches, in extents and as a share of the distance to the next root. */
const reach = 0.02
const reachShare = 0.1
/** A root found farther than this share of its way from where it was sent has gone round a bend that a straight piece would cut. */
const bend = 0.15
/** A root found this near to where it was sent, as a share of the distance to the next, is the one sent: slow ones hardly leave their place. */
const slack = 1e-3
/** Directions this close (radians) to the axis are on it: a real place spreads symmetrically. */
const onAxis = 1e-6
const attempts = 40

/** The step of gain that carries the roots of a station as far as the reach: |z - z0|^m = |c| |k - k0|. */
export function gainStepOf(loop: ScaledLoop, k0: number, station: Pick<Station, 'place' | 'count'>, others: Complex[]): number {
  const size = complex.abs(spreadFactor(loop, k0, station.place, station.count))
  return size === 0 ? Infinity : Math.min(reach, reachShare * gapAround(station.place, others)) ** station.count / size
}

function gapAround(place: Complex, others: Complex[]): number {
  return Math.min(1, ...others.map(other => complex.distance(other, place)))
}

/** All places where the roots of the stations stand, the mirror images too, but for one. */
function otherPlaces(stations: Station[], but: Station): Complex[] {
  return stations.flatMap((station) => {
    const mirror = station.place.im > 0 ? [complex.conjugate(station.place)] : []
    return station === but ? mirror : [station.place, ...mirror]
  })
}

/**
 * Roots just above gain k0: every station sends its roots out along its spread directions, the far station its roots in from infinity.
 * @param room the gain goes no further than this above k0
 * @returns the movers and the gain they stand at
 */
export function launch(loop: ScaledLoop, k0: number, stations: Station[], far: FarStation | null, room: number): Launched {
  let step = Math.min(room, ...stations.map(station => gainStepOf(loop, k0, station, otherPlaces(stations, station))))
  if (far !== null) step = Math.min(step, farGainStep(far))
  for (let attempt = 0; ; attempt++) {
    const k = k0 + step
    const settle = attempt >= attempts || k0 + step / 4 === k0
    const groups = stations.map(station => leave(loop, k0, k, station, gapAround(station.place, otherPlaces(stations, station)), settle))
    if (far !== null) groups.push(comeIn(loop, k0, k, far, settle))
    if (groups.every(group => group !== null)) return { movers: groups.flat(), k }
    step /= 4
  }
}

/** The step of gain about that of the far station which its roots need to come in from infinity to the edge. */
export function farGainStep({ coefficient, count }: FarStation): number {
  return Math.abs(coefficient) / edge ** count
}

/** The roots of one station at gain k; null where the corrector ends elsewhere than sent (the step was too long), unless told to settle for it. */
function leave(loop: ScaledLoop, k0: number, k: number, station: Station, gap: number, settle: boolean): Mover[] | null {
  const { place, count } = station
  const movers = sendOut(loop, k, place, complex.scale(spreadFactor(loop, k0, place, count), k - k0), count, gap, settle)
  return movers && assign(station, movers)
}

function comeIn(loop: ScaledLoop, k0: number, k: number, far: FarStation, settle: boolean): Mover[] | null {
  const movers = sendOut(loop, k, complex.zero, { re: far.coefficient / (k - k0), im: 0 }, far.count, 0, settle)
  return movers && assign({ place: complex.zero, count: far.count, branches: far.branches, mirrors: [] }, movers)
}

/** Roots near place + spread^(1/count), in all its directions (from a real place: one of each mirrored pair). */
function sendOut(loop: ScaledLoop, k: number, place: Complex, spread: Complex, count: number, gap: number, settle: boolean): Mover[] | null {
  const size = complex.abs(spread) ** (1 / count)
  const movers: Mover[] = []
  for (let turn = 0; turn < count; turn++) {
    const angle = (complex.arg(spread) + 2 * Math.PI * turn) / count
    const real = place.im === 0 && Math.abs(Math.sin(angle)) < onAxis
    if (place.im === 0 && !real && Math.sin(angle) < 0) continue
    const target = { re: place.re + size * Math.cos(angle), im: real ? 0 : place.im + size * Math.sin(angle) }
    const root = refine(loop, k, target.re, target.im, real)
    const astray = root === null || Math.hypot(root.re - target.re, root.im - target.im) > bend * size + (count === 1 ? slack * gap : 0)
    if (astray && !settle) return null
    const at = astray ? { ...target, velocityRe: 0, velocityIm: 0 } : root
    movers.push({ ...at, branch: noBranch, mirror: real ? null : noBranch })
  }
  return movers
}

const noBranch: Branch = { points: [] }

/**
 * Gives the branches that came in to the roots that go out. At a meeting any assignment is continuous; on the axis the leftmost come first, and a pair that
 * came in goes on as a pair where it can.
 */
function assign({ place, branches, mirrors }: Station, movers: Mover[]): Mover[] {
  const free = [...branches]
  const mirrored = [...mirrors]
  // A root without a branch (which only numbers beyond all accuracy bring about) is carried on unseen.
  const next = (from: Branch[]) => from.shift() ?? { points: [] }
  if (place.im > 0) return movers.map(mover => ({ ...mover, branch: next(free), mirror: next(mirrored) }))
  return [...movers]
    .sort((a, b) => Number(a.mirror === null) - Number(b.mirror === null) || a.re - b.re)
    .map(mover => ({ ...mover, branch: next(free), mirror: mover.mirror === null ? null : next(free) }))
}
