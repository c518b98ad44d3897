import type { Context } from 'konva/lib/Context'
import { nearestRoot } from '~/utils/bench/nearest-root'
import { flagSize } from '~/utils/plane/flags'
import { formatNumber } from '~/utils/plane/labels'
import { rayAngle, visibleRay } from '~/utils/plane/ray'
import { isInView, toScreen, type ScreenPoint } from '~/utils/plane/viewport'
import { paint } from '~/utils/plane/colors'
import { paintGrip } from './paint-grip'
import { paintPointLabel } from './paint-point-label'
import { circle, font, lozenge, strokeLines, writeText } from './paint-tools'
import type { HandScene } from './plane-scene'

const ringRadius = 12

/** All that follows the hand: ray, meetings, closed-loop roots, design point and their labels. */
export function paintHand(context: Context, scene: HandScene): void {
  paintRay(context, scene)
  paintMeetings(context, scene)
  paintReached(context, scene)
  paintRoots(context, scene)
  paintFlags(context, scene)
  paintGrip(context, scene)
  paintLeftover(context, scene)
  paintGhost(context, scene)
  paintPoint(context, scene)
  paintFrequency(context, scene)
  paintHover(context, scene)
  paintPointLabel(context, scene)
}

function paintRay(context: Context, { viewport, colors, point, grip, turning }: HandScene): void {
  const angle = rayAngle(point)
  const shown = visibleRay(viewport, angle)
  if (shown) {
    const at = toScreen(viewport, point)
    const end = grip && Math.hypot(grip.x - shown[0].x, grip.y - shown[0].y) > Math.hypot(at.x - shown[0].x, at.y - shown[0].y) ? grip : shown[1]
    strokeLines(context, [[shown[0], end]], paint(colors.brass), turning ? 2.6 : 1.9)
  }
  const conjugate = visibleRay(viewport, -angle)
  if (conjugate && angle < Math.PI) strokeLines(context, [conjugate], paint(colors.brass, 0.42), 1.4)
}

/** Short strokes across the ray where it truly meets the locus. */
function paintMeetings(context: Context, { viewport, colors, meetings, point }: HandScene): void {
  const angle = rayAngle(point)
  const arm = { x: 8 * Math.sin(angle), y: 8 * Math.cos(angle) }
  const strokes = meetings.map((meeting) => {
    const { x, y } = toScreen(viewport, meeting)
    return [{ x: x - arm.x, y: y - arm.y }, { x: x + arm.x, y: y + arm.y }] as const
  })
  context.lineCap = 'round'
  strokeLines(context, strokes, paint(colors.paper), 6)
  strokeLines(context, strokes, paint(colors.brassInk), 3)
  context.lineCap = 'butt'
}

/** A thin line from the point asked for to the root that the gain obtains nearest to it. */
function paintReached(context: Context, { viewport, colors, point, roots, onLocus, stale }: HandScene): void {
  const root = nearestRoot(roots, point)
  if (onLocus || !root) return
  const [from, to] = [toScreen(viewport, point), toScreen(viewport, root)]
  if (Math.hypot(to.x - from.x, to.y - from.y) < ringRadius) return
  context.setLineDash([5, 4])
  strokeLines(context, [[from, to]], paint(stale ? colors.slate : colors.sea, stale ? 0.5 : 1), 1.3)
  context.setLineDash([])
}

function paintRoots(context: Context, { viewport, colors, roots, stale }: HandScene): void {
  for (const root of roots) {
    const at = toScreen(viewport, root)
    if (!isInView(viewport, at, -12)) continue
    lozenge(context, at, 10)
    context.fillStyle = paint(colors.paper)
    context.fill()
    lozenge(context, at, 7.5)
    if (stale) {
      context.strokeStyle = paint(colors.slate, 0.8)
      context.lineWidth = 1.4
      context.stroke()
    } else {
      context.fillStyle = paint(colors.sea)
      context.fill()
    }
  }
}

/** The angle left over, as an arc at the point asked for, opened from the direction of the ray. */
function paintLeftover(context: Context, { viewport, colors, point, leftoverDeg, stale }: HandScene): void {
  if (leftoverDeg === null || Math.abs(leftoverDeg) < 0.5) return
  const { x, y } = toScreen(viewport, point)
  const from = rayAngle(point)
  const to = from + leftoverDeg * Math.PI / 180
  const radius = 30
  const color = paint(stale ? colors.slate : colors.vermilion)
  context.beginPath()
  context.arc(x, y, radius, -from, -to, leftoverDeg > 0)
  context.strokeStyle = color
  context.lineWidth = 1.6
  context.stroke()
  const leg = (angle: number) => [
    { x: x + (ringRadius + 2) * Math.cos(angle), y: y - (ringRadius + 2) * Math.sin(angle) },
    { x: x + (radius + 6) * Math.cos(angle), y: y - (radius + 6) * Math.sin(angle) },
  ] as const
  strokeLines(context, [leg(to)], color, 1.6)
}

/** The outline of the design point where it may go. */
function paintGhost(context: Context, { viewport, colors, ghost }: HandScene): void {
  if (!ghost) return
  circle(context, toScreen(viewport, ghost), ringRadius)
  context.setLineDash([4, 3])
  context.strokeStyle = paint(colors.vermilion)
  context.lineWidth = 1.8
  context.stroke()
  context.setLineDash([])
}

/** A ring with a hair cross; on the locus it is filled and carries the lozenge of the root that it has become. */
function paintPoint(context: Context, { viewport, colors, point, onLocus }: HandScene): void {
  const at = toScreen(viewport, point)
  const { x, y } = at
  const inner = onLocus ? ringRadius : 3
  const outer = ringRadius + 9
  const hairs: [ScreenPoint, ScreenPoint][] = [[1, 0], [-1, 0], [0, 1], [0, -1]].map(([dx = 0, dy = 0]) => [
    { x: x + dx * inner, y: y + dy * inner }, { x: x + dx * outer, y: y + dy * outer },
  ])
  circle(context, at, ringRadius)
  context.fillStyle = paint(onLocus ? colors.vermilion : colors.paper, onLocus ? 1 : 0.55)
  context.fill()
  strokeLines(context, hairs, paint(colors.vermilion), 1.5)
  circle(context, at, ringRadius)
  context.strokeStyle = paint(colors.vermilion)
  context.lineWidth = 2.4
  context.stroke()
  if (!onLocus) return
  lozenge(context, at, 6)
  context.fillStyle = paint(colors.paper)
  context.fill()
}

/** Numbered flags of the comments pinned to the plane. */
function paintFlags(context: Context, { colors, flags }: HandScene): void {
  for (const { flag, foot, cloth } of flags) {
    strokeLines(context, [[foot, cloth]], paint(colors.ink), 1.4)
    if (flag.selected) {
      context.fillStyle = paint(colors.brass)
      context.fillRect(cloth.x - 3, cloth.y - 3, flagSize.width + 6, flagSize.height + 6)
    }
    context.fillStyle = paint(colors.ink)
    context.fillRect(cloth.x, cloth.y, flagSize.width, flagSize.height)
    context.font = font(12, 700)
    const middle = { x: cloth.x + flagSize.width / 2, y: cloth.y + flagSize.height / 2 + 0.5 }
    writeText(context, String(flag.number), middle, { color: paint(colors.paper), align: 'center' })
  }
}

function paintHover(context: Context, { viewport, colors, hover }: HandScene): void {
  if (!hover) return
  const at = toScreen(viewport, hover.point)
  circle(context, at, 4.5)
  context.fillStyle = paint(colors.paper)
  context.fill()
  context.strokeStyle = paint(colors.ink)
  context.lineWidth = 1.8
  context.stroke()
  context.font = font(12, 600)
  const width = context.measureText(hover.label).width
  const x = at.x + 14 + width > viewport.width - 6 ? at.x - 14 - width : at.x + 14
  writeText(context, hover.label, { x, y: Math.max(12, at.y - 14) }, { color: paint(colors.ink), halo: paint(colors.paper) })
}

/** A short bar across the imaginary axis at jw, and its figure. */
function paintFrequency(context: Context, { viewport, colors, frequency }: HandScene): void {
  if (frequency === null) return
  const { x, y } = toScreen(viewport, { re: 0, im: frequency })
  if (!isInView(viewport, { x, y })) return
  const bar = [{ x: x - 10, y }, { x: x + 10, y }] as const
  strokeLines(context, [bar], paint(colors.paper), 6)
  strokeLines(context, [bar], paint(colors.ink), 2.4)
  context.font = font(12, 600)
  const onRight = x + 80 < viewport.width
  writeText(context, `${formatNumber(frequency)}j`, { x: onRight ? x + 16 : x - 16, y }, { color: paint(colors.ink), halo: paint(colors.paper), align: onRight ? 'left' : 'right' })
}
