import type { Complex } from '#shared/numerics/complex'

/** A place on the screen in CSS pixels, counted from the upper left corner of the plane. */
export interface ScreenPoint {
  x: number
  y: number
}

/** A rectangle of the s-plane in rad/s. */
export interface Bounds {
  left: number
  right: number
  bottom: number
  top: number
}

/** What the screen shows of the s-plane: both axes share one scale, so that angles are true. Never changed in place. */
export interface Viewport {
  readonly center: Complex
  /** CSS pixels per rad/s. */
  readonly scale: number
  readonly width: number
  readonly height: number
}

/** From a screenful of a million rad/s to one of a millionth, on the narrowest and the widest screen. */
const scaleLimits = { least: 1e-4, most: 1e10 }

const clampScale = (scale: number) => Math.min(scaleLimits.most, Math.max(scaleLimits.least, scale))

export function toScreen(viewport: Viewport, point: Complex): ScreenPoint {
  return {
    x: viewport.width / 2 + (point.re - viewport.center.re) * viewport.scale,
    y: viewport.height / 2 - (point.im - viewport.center.im) * viewport.scale,
  }
}

export function toWorld(viewport: Viewport, at: ScreenPoint): Complex {
  return {
    re: viewport.center.re + (at.x - viewport.width / 2) / viewport.scale,
    im: viewport.center.im - (at.y - viewport.height / 2) / viewport.scale,
  }
}

export function boundsOf(viewport: Viewport): Bounds {
  const halfWidth = viewport.width / 2 / viewport.scale
  const halfHeight = viewport.height / 2 / viewport.scale
  const { re, im } = viewport.center
  return { left: re - halfWidth, right: re + halfWidth, bottom: im - halfHeight, top: im + halfHeight }
}

/** Zooms by a factor; the point of the s-plane under `at` stays there. */
export function zoomAbout(viewport: Viewport, at: ScreenPoint, factor: number): Viewport {
  return holdAt({ ...viewport, scale: clampScale(viewport.scale * factor) }, toWorld(viewport, at), at)
}

/** Moves the view so that `point` appears at `at`. */
export function holdAt(viewport: Viewport, point: Complex, at: ScreenPoint): Viewport {
  return {
    ...viewport,
    center: {
      re: point.re - (at.x - viewport.width / 2) / viewport.scale,
      im: point.im + (at.y - viewport.height / 2) / viewport.scale,
    },
  }
}

/** Moves the drawing by (dx, dy) pixels. */
export function panBy(viewport: Viewport, dx: number, dy: number): Viewport {
  const { re, im } = viewport.center
  return { ...viewport, center: { re: re - dx / viewport.scale, im: im + dy / viewport.scale } }
}

/** The view in a window of another size; the middle stays in the middle. */
export function resize(viewport: Viewport, width: number, height: number): Viewport {
  return { ...viewport, width, height }
}

/** The view that shows the whole of `bounds` with `padding` pixels around it. */
export function fitBounds(bounds: Bounds, width: number, height: number, padding: number): Viewport {
  const across = Math.max(bounds.right - bounds.left, Number.MIN_VALUE)
  const up = Math.max(bounds.top - bounds.bottom, Number.MIN_VALUE)
  const scale = Math.min(Math.max(width - 2 * padding, 1) / across, Math.max(height - 2 * padding, 1) / up)
  return {
    center: { re: (bounds.left + bounds.right) / 2, im: (bounds.bottom + bounds.top) / 2 },
    scale: clampScale(scale),
    width,
    height,
  }
}

/** Whether a place lies inside the view, `margin` pixels from its edges. */
export function isInView(viewport: Viewport, at: ScreenPoint, margin = 0): boolean {
  return at.x >= margin && at.y >= margin && at.x <= viewport.width - margin && at.y <= viewport.height - margin
}
