import type { Complex } from '#shared/numerics/complex'
import { toScreen, toWorld, type ScreenPoint, type Viewport } from './viewport'

/** Radii in pixels within which a press takes hold; a finger is less exact than a mouse. */
export const reach = {
  point: { mouse: 28, touch: 42 },
  grip: { mouse: 24, touch: 34 },
  tick: { mouse: 12, touch: 24 },
  locus: { mouse: 10, touch: 18 },
  axis: { mouse: 8 },
} as const

export interface Targets {
  viewport: Viewport
  designPoint: Complex
  grip: ScreenPoint | null
  /** Where the present ray meets the locus. */
  meetings: readonly Complex[]
}

export interface Hit {
  kind: 'point' | 'grip' | 'plane'
  /** The meeting that a press without movement goes to, if one is nearer than the point itself. */
  tick: Complex | null
}

/** What lies under a press. Between grip and design point the nearer one wins. */
export function hitTest(at: ScreenPoint, targets: Targets, touch: boolean): Hit {
  const how = touch ? 'touch' : 'mouse'
  const away = (to: ScreenPoint) => Math.hypot(to.x - at.x, to.y - at.y)
  const point = toScreen(targets.viewport, targets.designPoint)
  const toPoint = away(point)
  const toGrip = targets.grip ? away(targets.grip) : Infinity
  const tick = nearestTick(at, targets, reach.tick[how])
  // A point that stands within a few pixels of a meeting, but not on it, is brought onto it by a click.
  const tickWins = tick !== null && (away(tick.at) < toPoint || Math.hypot(tick.at.x - point.x, tick.at.y - point.y) < 4)
  const kind = toGrip <= reach.grip[how] && toGrip < toPoint ? 'grip' : toPoint <= reach.point[how] ? 'point' : 'plane'
  const standsThere = tick !== null && tick.meeting.re === targets.designPoint.re && tick.meeting.im === targets.designPoint.im
  return { kind, tick: tickWins && !standsThere && kind !== 'grip' ? tick.meeting : null }
}

/** The meeting nearest to a place on the screen, within a radius. */
export function nearestTick(
  at: ScreenPoint, { viewport, meetings }: Pick<Targets, 'viewport' | 'meetings'>, radius: number,
): { meeting: Complex, at: ScreenPoint } | null {
  let best: { meeting: Complex, at: ScreenPoint } | null = null
  let least = radius
  for (const meeting of meetings) {
    const place = toScreen(viewport, meeting)
    const distance = Math.hypot(place.x - at.x, place.y - at.y)
    if (distance > least) continue
    least = distance
    best = { meeting, at: place }
  }
  return best
}

/** The frequency, rad/s, that a pointer near the positive imaginary axis rests on; null anywhere else. */
export function frequencyUnder(viewport: Viewport, at: ScreenPoint): number | null {
  const { im } = toWorld(viewport, at)
  const away = Math.abs(at.x - toScreen(viewport, { re: 0, im }).x)
  return im > 0 && away <= reach.axis.mouse ? im : null
}
