import type { Complex } from '#shared/numerics/complex'
import type { LoopAnalysis } from '#shared/control/types'
import { clipPolyline, type Rect } from './clip'
import { toScreen, type ScreenPoint, type Viewport } from './viewport'

type Branch = LoopAnalysis['branches'][number]

export interface LocusHover {
  point: Complex
  gain: number
  distance: number
}

/**
 * The place on the locus nearest to `at` and the gain there, interpolated between the nodes of the branch; null when none is within `reach`
 * pixels. Between nodes the gain is taken as varying geometrically, from a pole (gain 0) as varying linearly.
 */
export function hoverLocus(branches: readonly Branch[], viewport: Viewport, at: ScreenPoint, reach: number): LocusHover | null {
  let best: LocusHover | null = null
  for (const { points } of branches) {
    for (let index = 1; index < points.length; index++) {
      const from = points[index - 1]!
      const to = points[index]!
      const a = toScreen(viewport, { re: from[0], im: from[1] })
      const b = toScreen(viewport, { re: to[0], im: to[1] })
      const t = footOfPerpendicular(a, b, at)
      const distance = Math.hypot(a.x + t * (b.x - a.x) - at.x, a.y + t * (b.y - a.y) - at.y)
      if (distance > reach || (best && distance >= best.distance)) continue
      best = {
        point: { re: from[0] + t * (to[0] - from[0]), im: from[1] + t * (to[1] - from[1]) },
        gain: between(from[2], to[2], t),
        distance,
      }
    }
  }
  return best
}

function footOfPerpendicular(a: ScreenPoint, b: ScreenPoint, at: ScreenPoint): number {
  const dx = b.x - a.x
  const dy = b.y - a.y
  const square = dx * dx + dy * dy
  return square === 0 ? 0 : Math.min(1, Math.max(0, ((at.x - a.x) * dx + (at.y - a.y) * dy) / square))
}

function between(from: number, to: number, t: number): number {
  return from > 0 && to > 0 ? from * (to / from) ** t : from + t * (to - from)
}

/** How far a branch is drawn on beyond its last node, as a multiple of the distance from the origin. */
const beyond = 1000
/** A branch that ends this many times further out than the farthest pole or zero has no zero to come to. */
const outside = 4

/** The branches as they are drawn: those that come to no zero run on along their asymptotes for as far as anybody pans. */
export function drawnBranches({ branches, openLoop }: Pick<LoopAnalysis, 'branches' | 'openLoop'>): Branch[] {
  const extent = Math.max(0, ...[...openLoop.poles, ...openLoop.zeros].map(({ re, im }) => Math.hypot(re, im)))
  return branches.map((branch) => {
    const [from, last] = branch.points.slice(-2)
    if (!from || !last) return branch
    const size = Math.hypot(last[0], last[1])
    if (size <= outside * extent) return branch
    const [x, y] = [last[0] - from[0], last[1] - from[1]]
    const reach = beyond * size / Math.hypot(x, y)
    return Number.isFinite(reach) ? { points: [...branch.points, [last[0] + x * reach, last[1] + y * reach, last[2]]] } : branch
  })
}

/** The visible runs of every branch, as screen polylines. */
export function visibleBranches(branches: readonly Branch[], viewport: Viewport, frame: Rect): ScreenPoint[][] {
  return branches.flatMap(({ points }) =>
    clipPolyline(points.map(([re, im]) => toScreen(viewport, { re, im })), frame))
}

export interface ArrowHead extends ScreenPoint {
  /** Direction of growing gain on the screen, in radians, y downwards. */
  angle: number
}

/** Arrow heads along visible runs: one in the middle of a short run, further ones `spacing` pixels apart on a long one. */
export function arrowHeads(runs: ScreenPoint[][], spacing: number): ArrowHead[] {
  return runs.flatMap((run) => {
    const length = run.reduce((sum, point, index) => index === 0 ? 0 : sum + gap(run[index - 1]!, point), 0)
    if (length < 48) return []
    const count = Math.max(1, Math.floor(length / spacing))
    return placesAlong(run, Array.from({ length: count }, (_, n) => length * (n + 0.5) / count))
  })
}

const gap = (a: ScreenPoint, b: ScreenPoint) => Math.hypot(b.x - a.x, b.y - a.y)

function placesAlong(run: ScreenPoint[], distances: number[]): ArrowHead[] {
  const heads: ArrowHead[] = []
  let gone = 0
  for (let index = 1; index < run.length && heads.length < distances.length; index++) {
    const a = run[index - 1]!
    const b = run[index]!
    const length = gap(a, b)
    while (heads.length < distances.length && distances[heads.length]! <= gone + length && length > 0) {
      const t = (distances[heads.length]! - gone) / length
      heads.push({ x: a.x + t * (b.x - a.x), y: a.y + t * (b.y - a.y), angle: Math.atan2(b.y - a.y, b.x - a.x) })
    }
    gone += length
  }
  return heads
}
