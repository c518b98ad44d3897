import type { ScreenPoint } from './viewport'

export interface Rect {
  left: number
  top: number
  right: number
  bottom: number
}

/** The part of the segment a-b inside a rectangle, or null (Liang and Barsky, 1984). */
export function clipSegment(a: ScreenPoint, b: ScreenPoint, rect: Rect): [ScreenPoint, ScreenPoint] | null {
  const dx = b.x - a.x
  const dy = b.y - a.y
  let enter = 0
  let leave = 1
  for (const [direction, room] of [[-dx, a.x - rect.left], [dx, rect.right - a.x], [-dy, a.y - rect.top], [dy, rect.bottom - a.y]] as const) {
    if (direction === 0) {
      if (room < 0) return null
      continue
    }
    const at = room / direction
    if (direction < 0) enter = Math.max(enter, at)
    else leave = Math.min(leave, at)
  }
  if (!(enter <= leave)) return null
  const along = (t: number) => ({ x: a.x + t * dx, y: a.y + t * dy })
  return [enter === 0 ? a : along(enter), leave === 1 ? b : along(leave)]
}

/** A half plane of the screen: the places where a x + b y + c >= 0. */
export interface HalfPlane {
  a: number
  b: number
  c: number
}

/** The part of a convex polygon inside a half plane (Sutherland and Hodgman, 1974). */
export function clipPolygon(polygon: ScreenPoint[], { a, b, c }: HalfPlane): ScreenPoint[] {
  const side = (at: ScreenPoint) => a * at.x + b * at.y + c
  const inside: ScreenPoint[] = []
  polygon.forEach((current, index) => {
    const next = polygon[(index + 1) % polygon.length]!
    const here = side(current)
    const there = side(next)
    if (here >= 0) inside.push(current)
    if (here * there < 0) {
      const t = here / (here - there)
      inside.push({ x: current.x + t * (next.x - current.x), y: current.y + t * (next.y - current.y) })
    }
  })
  return inside.length >= 3 ? inside : []
}

/** The corners of a rectangle. */
export function corners(rect: Rect): ScreenPoint[] {
  return [
    { x: rect.left, y: rect.top }, { x: rect.right, y: rect.top },
    { x: rect.right, y: rect.bottom }, { x: rect.left, y: rect.bottom },
  ]
}

/** The runs of a polyline that show inside a rectangle, cut at its edges. */
export function clipPolyline(points: ScreenPoint[], rect: Rect): ScreenPoint[][] {
  const runs: ScreenPoint[][] = []
  let run: ScreenPoint[] | null = null
  for (let index = 1; index < points.length; index++) {
    const piece = clipSegment(points[index - 1]!, points[index]!, rect)
    if (!piece) {
      run = null
      continue
    }
    if (run && run[run.length - 1] === piece[0]) run.push(piece[1])
    else runs.push(run = [...piece])
  }
  return runs
}
