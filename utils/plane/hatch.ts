import { clipPolygon, type HalfPlane } from './clip'
import type { ScreenPoint } from './viewport'

/** Which way the lines of a hatching lean: rising or falling to the right. */
export type Lean = 'rising' | 'falling'

/**
 * Section lines across a convex polygon, at 45 degrees and `spacing` pixels apart. They are counted from `anchor`, so that the lines of
 * neighbouring polygons meet and move with the drawing when it is panned.
 */
export function hatchLines(polygon: ScreenPoint[], spacing: number, lean: Lean, anchor: ScreenPoint): [ScreenPoint, ScreenPoint][] {
  if (polygon.length < 3) return []
  const sign = lean === 'rising' ? 1 : -1
  const height = (at: ScreenPoint) => at.x + sign * at.y
  const offset = height(anchor)
  const step = spacing * Math.SQRT2
  const heights = polygon.map(height)
  const first = Math.ceil((Math.min(...heights) - offset) / step)
  const last = Math.floor((Math.max(...heights) - offset) / step)
  const lines: [ScreenPoint, ScreenPoint][] = []
  for (let n = first; n <= last; n++) {
    const line = chord(polygon, height, offset + n * step)
    if (line) lines.push(line)
  }
  return lines
}

/** Where the line height = level enters and leaves a convex polygon. */
function chord(polygon: ScreenPoint[], height: (at: ScreenPoint) => number, level: number): [ScreenPoint, ScreenPoint] | null {
  const hits: ScreenPoint[] = []
  polygon.forEach((a, index) => {
    const b = polygon[(index + 1) % polygon.length]!
    const from = height(a) - level
    const to = height(b) - level
    if ((from < 0) === (to < 0)) return
    const t = from / (from - to)
    hits.push({ x: a.x + t * (b.x - a.x), y: a.y + t * (b.y - a.y) })
  })
  return hits.length === 2 ? [hits[0]!, hits[1]!] : null
}

/** A convex polygon cut by several half planes. */
export function cut(polygon: ScreenPoint[], halfPlanes: HalfPlane[]): ScreenPoint[] {
  return halfPlanes.reduce(clipPolygon, polygon)
}
