import { abs, arg, type Complex } from '#shared/numerics/complex'
import { clipSegment } from './clip'
import { toScreen, type ScreenPoint, type Viewport } from './viewport'

/** The constant-damping ray is told by its angle from the positive real axis, in [0, pi]. */
export type RayAngle = number

export function rayAngle(point: Complex): RayAngle {
  return arg({ re: point.re, im: Math.abs(point.im) })
}

/** The point of a ray at a natural frequency. Exactly real on the negative real axis. */
export function pointOnRay(angle: RayAngle, naturalFrequency: number): Complex {
  if (angle >= Math.PI) return { re: -naturalFrequency, im: 0 }
  return { re: naturalFrequency * Math.cos(angle), im: naturalFrequency * Math.sin(angle) }
}

/** The foot of the perpendicular from `point` on a ray, never nearer the origin than `leastFrequency`. */
export function projectToRay(point: Complex, angle: RayAngle, leastFrequency: number): Complex {
  const along = point.re * Math.cos(angle) + point.im * Math.sin(angle)
  return pointOnRay(angle, Math.max(along, leastFrequency))
}

/** `point` brought into the upper half plane and away from the origin. */
export function freePoint(point: Complex, leastFrequency: number): Complex {
  const upper = { re: point.re, im: Math.max(point.im, 0) }
  return abs(upper) < leastFrequency ? pointOnRay(rayAngle(upper), leastFrequency) : upper
}

/** The part of a ray that shows, from its inner to its outer end; null when it passes outside the view. */
export function visibleRay(viewport: Viewport, angle: RayAngle, margin = 0): [ScreenPoint, ScreenPoint] | null {
  const origin = toScreen(viewport, { re: 0, im: 0 })
  const reach = Math.hypot(origin.x - viewport.width / 2, origin.y - viewport.height / 2) + viewport.width + viewport.height
  const far = { x: origin.x + reach * Math.cos(angle), y: origin.y - reach * Math.sin(angle) }
  return clipSegment(origin, far, {
    left: margin, top: margin, right: viewport.width - margin, bottom: viewport.height - margin,
  })
}

const gripMargin = 30
const gripClearance = 60

/**
 * Where the grip that turns the ray sits: near the outer end of what shows of the ray, clear of the design point; null when too little shows.
 */
export function gripPosition(viewport: Viewport, designPoint: Complex): ScreenPoint | null {
  const shown = visibleRay(viewport, rayAngle(designPoint), gripMargin)
  if (!shown) return null
  const [inner, outer] = shown
  const point = toScreen(viewport, designPoint)
  if (Math.hypot(outer.x - point.x, outer.y - point.y) >= gripClearance) return outer
  const length = Math.hypot(outer.x - inner.x, outer.y - inner.y)
  if (length === 0) return null
  const unit = { x: (outer.x - inner.x) / length, y: (outer.y - inner.y) / length }
  const along = (point.x - inner.x) * unit.x + (point.y - inner.y) * unit.y - gripClearance
  return along < 24 ? null : { x: inner.x + along * unit.x, y: inner.y + along * unit.y }
}

/** The meetings of ray and locus that belong to this very ray: while it turns, older ones are no longer true. */
export function meetingsOnRay(meetings: { point: Complex, gain: number }[] | undefined, angle: RayAngle): { point: Complex, gain: number }[] {
  return (meetings ?? []).filter(({ point }) => Math.abs(rayAngle(point) - angle) < 1e-5)
}
