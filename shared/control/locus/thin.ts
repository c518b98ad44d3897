interface Point {
  re: number
  im: number
  k: number
}

/** Points nearer than this to the last kept one (extents; of the distance from the origin further out) go, unless the branch turns... */
const spacing = 0.02
/** ...or this share of the distance from the origin, where that is less: slow roots beside fast ones keep their points too. */
const spacingNearOrigin = 0.15
/** Turn (radians) since the last kept piece that keeps a point. */
const turn = 0.1

/**
 * A branch with fewer points and the same looks: those that neither bend it nor are needed for its gains go. Ends that run outside are cut to one point
 * beyond the given distance from the origin.
 * @param outside in extents
 */
export function thin(points: Point[], outside: number): Point[] {
  const cut = trimEnds(points, outside)
  if (cut.length <= 2) return cut
  const kept = [cut[0]!]
  for (let i = 1; i + 1 < cut.length; i++) {
    const last = kept[kept.length - 1]!
    const here = cut[i]!
    const gap = Math.hypot(here.re - last.re, here.im - last.im)
    const next = cut[i + 1]!
    const onward = Math.hypot(next.re - here.re, next.im - here.im)
    const size = Math.hypot(here.re, here.im)
    if (gap + onward >= Math.min(spacing * Math.max(1, size), spacingNearOrigin * size) || bends(last, here, next)) kept.push(here)
  }
  kept.push(cut[cut.length - 1]!)
  return kept
}

function bends(a: Point, b: Point, c: Point): boolean {
  const x = b.re - a.re
  const y = b.im - a.im
  const u = c.re - b.re
  const v = c.im - b.im
  const size = Math.hypot(x, y) * Math.hypot(u, v)
  return size > 0 && (Math.abs(x * v - y * u) > Math.sin(turn) * size || x * u + y * v < 0)
}

function trimEnds(points: Point[], outside: number): Point[] {
  const isInside = ({ re, im }: Point) => Math.hypot(re, im) <= outside
  const first = points.findIndex(isInside)
  if (first < 0) return points
  let last = points.length - 1
  while (!isInside(points[last]!)) last--
  return points.slice(Math.max(0, first - 1), last + 2)
}
