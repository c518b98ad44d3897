import { dampingFromOvershoot } from '#shared/control/design-point'
import type { Requirement } from '#shared/control/types'
import { corners, type HalfPlane } from './clip'
import { cut, type Lean } from './hatch'
import { boundsOf, toScreen, type ScreenPoint, type Viewport } from './viewport'

/** A part of the plane where the design point breaks a requirement by the second-order rule of thumb; words for its edge, fullest first. */
export type Region =
  | { kind: 'damping', /** Of the edge. */ dampingRatio: number, forbids: 'less' | 'more', labels: string[] }
  | { kind: 'decay', /** Real part of the edge, in rad/s. */ edge: number, forbids: 'slower' | 'faster', labels: string[] }

const trim = (value: number) => String(Number(value.toPrecision(4))).replace('-', '−')

/** The regions that a list of requirements hatches off, upright edges first; readings that have no place in the plane give none. */
export function forbiddenRegions(requirements: readonly Requirement[]): Region[] {
  const regions = requirements.flatMap(requirement => regionOf(requirement) ?? [])
  return [...regions.filter(({ kind }) => kind === 'decay'), ...regions.filter(({ kind }) => kind === 'damping')]
}

function regionOf({ reading, limit, value }: Requirement): Region | null {
  const bound = limit === 'at-most' ? 'at most' : 'at least'
  if (reading === 'dampingRatio' && Math.abs(value) <= 1) {
    return { kind: 'damping', dampingRatio: value, forbids: limit === 'at-least' ? 'less' : 'more', labels: [`damping ratio ${bound} ${trim(value)}`] }
  }
  if (reading === 'overshootPercent' && value >= 0 && value <= 100) {
    return {
      kind: 'damping',
      dampingRatio: dampingFromOvershoot(value),
      forbids: limit === 'at-most' ? 'less' : 'more',
      labels: [`overshoot ${bound} ${trim(value)} % if second order`, `overshoot ${bound} ${trim(value)} %`],
    }
  }
  if (reading === 'settlingTime' && value > 0) {
    const words = `settles ${limit === 'at-most' ? 'within' : 'after'} ${trim(value)} s`
    return { kind: 'decay', edge: -4 / value, forbids: limit === 'at-most' ? 'slower' : 'faster', labels: [`${words} by rule of thumb`, words] }
  }
  return null
}

export interface RegionDrawing {
  /** Convex polygons to be hatched. */
  polygons: ScreenPoint[][]
  /** Edges to be drawn, from their inner end outward; the words go along the last. */
  edges: [ScreenPoint, ScreenPoint][]
  lean: Lean
  labels: string[]
  /** The forbidden side, where the words stand, lies to the right of the last edge seen from its inner end. */
  labelRight: boolean
  preferEnd: 'inner' | 'outer'
}

/** A region as polygons of the present view. */
export function drawRegion(region: Region, viewport: Viewport): RegionDrawing {
  const view = corners({ left: 0, top: 0, right: viewport.width, bottom: viewport.height })
  return region.kind === 'decay' ? drawDecay(region, viewport, view) : drawDamping(region, viewport, view)
}

function drawDecay(region: Region & { kind: 'decay' }, viewport: Viewport, view: ScreenPoint[]): RegionDrawing {
  const { x } = toScreen(viewport, { re: region.edge, im: 0 })
  const sign = region.forbids === 'slower' ? 1 : -1
  const polygon = cut(view, [{ a: sign, b: 0, c: -sign * x }])
  return {
    polygons: polygon.length > 0 ? [polygon] : [],
    edges: [[{ x, y: viewport.height }, { x, y: 0 }]],
    lean: 'falling',
    labels: region.labels,
    labelRight: region.forbids === 'slower',
    preferEnd: 'inner',
  }
}

/** Above and below the real axis the forbidden part is a wedge between axis and ray: two half planes each. */
function drawDamping(region: Region & { kind: 'damping' }, viewport: Viewport, view: ScreenPoint[]): RegionDrawing {
  const origin = toScreen(viewport, { re: 0, im: 0 })
  const angle = Math.PI - Math.acos(region.dampingRatio)
  const { left, right, top, bottom } = boundsOf(viewport)
  const reach = 2 * viewport.scale * (Math.max(Math.abs(left), Math.abs(right)) + Math.max(Math.abs(top), Math.abs(bottom)))
  const half = (up: 1 | -1) => {
    const along = { x: Math.cos(angle), y: -up * Math.sin(angle) }
    // The side of the ray that holds the positive real axis.
    const side = region.forbids === 'less' ? 1 : -1
    const normal = { a: side * Math.sin(angle), b: side * up * Math.cos(angle) }
    const ray: HalfPlane = { ...normal, c: -(normal.a * origin.x + normal.b * origin.y) }
    const upper: HalfPlane = { a: 0, b: -up, c: up * origin.y }
    return {
      polygon: cut(view, [upper, ray]),
      edge: [origin, { x: origin.x + reach * along.x, y: origin.y + reach * along.y }] as [ScreenPoint, ScreenPoint],
    }
  }
  const halves = [half(1), half(-1)]
  return {
    polygons: halves.map(({ polygon }) => polygon).filter(polygon => polygon.length > 0),
    edges: halves.map(({ edge }) => edge),
    lean: 'rising',
    labels: region.labels,
    labelRight: region.forbids === 'more',
    preferEnd: 'outer',
  }
}
