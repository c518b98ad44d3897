import type { Context } from 'konva/lib/Context'
import { dampingRatioOf, overshootFromDamping } from '#shared/control/design-point'
import { formatNumber } from '~/utils/plane/labels'
import { paint } from '~/utils/plane/colors'
import { rayAngle } from '~/utils/plane/ray'
import { circle, font, writeText } from './paint-tools'
import type { HandScene } from './plane-scene'

interface GripLabel {
  first: string
  second: string
  /** The side of the words that touches the grip. */
  x: number
  y: number
  width: number
  align: 'left' | 'right'
}

/** The words at the grip and where they stand: left of it where there is room, otherwise right of it. */
export function gripLabel(context: Context, { viewport, point, grip }: HandScene): GripLabel | null {
  if (!grip) return null
  const ratio = dampingRatioOf(point)
  const overshoot = `overshoot ${formatNumber(overshootFromDamping(ratio), 3, 10)} %`
  const first = `damping ratio ${formatNumber(ratio, 3, 0.5)}`
  const full = ratio > 0 ? `${overshoot} if second order` : 'grows if second order'
  context.font = font(13, 600)
  const firstWidth = context.measureText(first).width
  context.font = font(12)
  const fullWidth = Math.max(firstWidth, context.measureText(full).width)
  const room = Math.max(grip.x, viewport.width - grip.x) - 24
  const second = fullWidth <= room || ratio <= 0 ? full : overshoot
  const width = Math.max(firstWidth, context.measureText(second).width)
  const align = grip.x - 24 - width > 0 ? 'right' : 'left'
  // Beside a ray that lies flat the words would stand on it: then they stand above.
  const flat = Math.sin(rayAngle(point)) < 0.25
  const y = Math.min(viewport.height - 24, Math.max(10, grip.y - (flat ? 38 : 7)))
  const away = flat ? -9 : 17
  return { first, second, x: align === 'right' ? grip.x - away : grip.x + away, y, width, align }
}

export function paintGrip(context: Context, scene: HandScene): void {
  const { colors, grip, turning } = scene
  const label = gripLabel(context, scene)
  if (!grip || !label) return
  circle(context, grip, 9)
  context.fillStyle = paint(turning ? colors.brass : colors.paper)
  context.fill()
  context.strokeStyle = paint(colors.brass)
  context.lineWidth = 2.2
  context.stroke()
  const style = { halo: paint(colors.paper), align: label.align }
  context.font = font(13, 600)
  writeText(context, label.first, label, { ...style, color: paint(colors.brassInk) })
  context.font = font(12)
  writeText(context, label.second, { x: label.x, y: label.y + 17 }, { ...style, color: paint(colors.slate) })
}
