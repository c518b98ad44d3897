import type { Context } from 'konva/lib/Context'
import type { ScreenPoint } from '~/utils/plane/viewport'

export const font = (size: number, weight = 500) => `${weight} ${size}px Manrope, system-ui, sans-serif`

/** Many segments in one stroke. */
export function strokeLines(context: Context, lines: readonly (readonly [ScreenPoint, ScreenPoint])[], color: string, width: number): void {
  context.beginPath()
  for (const [a, b] of lines) {
    context.moveTo(a.x, a.y)
    context.lineTo(b.x, b.y)
  }
  context.strokeStyle = color
  context.lineWidth = width
  context.stroke()
}

export function tracePolyline(context: Context, points: readonly ScreenPoint[]): void {
  points.forEach(({ x, y }, index) => index === 0 ? context.moveTo(x, y) : context.lineTo(x, y))
}

/** A line of text, its middle at `at.y`; the halo lifts it off what lies beneath. */
export function writeText(
  context: Context, words: string, at: ScreenPoint, style: { color: string, halo?: string, align?: 'left' | 'right' | 'center' },
): void {
  context.textBaseline = 'middle'
  context.textAlign = style.align ?? 'left'
  if (style.halo) {
    context.strokeStyle = style.halo
    context.lineWidth = 4
    context.lineJoin = 'round'
    context.strokeText(words, at.x, at.y)
  }
  context.fillStyle = style.color
  context.fillText(words, at.x, at.y)
}

export function circle(context: Context, { x, y }: ScreenPoint, radius: number): void {
  context.beginPath()
  context.arc(x, y, radius, 0, 2 * Math.PI)
}

export function lozenge(context: Context, { x, y }: ScreenPoint, radius: number): void {
  context.beginPath()
  context.moveTo(x, y - radius)
  context.lineTo(x + radius, y)
  context.lineTo(x, y + radius)
  context.lineTo(x - radius, y)
  context.closePath()
}
