import type { Context } from 'konva/lib/Context'
import { clipSegment } from '~/utils/plane/clip'
import { hatchLines } from '~/utils/plane/hatch'
import { drawRegion, type RegionDrawing } from '~/utils/plane/regions'
import { formatImaginaryMark, formatMark, gridStep, scaleMarks } from '~/utils/plane/scale'
import { boundsOf, toScreen, type ScreenPoint, type Viewport } from '~/utils/plane/viewport'
import { paint } from '~/utils/plane/colors'
import { font, strokeLines, writeText } from './paint-tools'
import type { GroundScene } from './plane-scene'

const hatchSpacing = 8
const leastGrid = 84

/** Hatched regions, grid and axes: what stays while the hand moves. */
export function paintGround(context: Context, scene: GroundScene): void {
  const { viewport, colors, regions } = scene
  context.font = font(12)
  const { left, right, bottom, top } = boundsOf(viewport)
  const step = gridStep({ from: left, to: right }, viewport.scale, leastGrid, label => context.measureText(label).width)
  const across = scaleMarks(left, right, step)
  const up = scaleMarks(bottom, top, step)
  const origin = toScreen(viewport, { re: 0, im: 0 })

  const drawings = regions.map(region => drawRegion(region, viewport))
  for (const drawing of drawings) hatch(context, scene, drawing, origin)

  const lines: [ScreenPoint, ScreenPoint][] = [
    ...across.map(re => vertical(viewport, re)),
    ...up.map(im => horizontal(viewport, im)),
  ]
  strokeLines(context, lines, paint(colors.hairline, 0.75), 1)
  strokeLines(context, [vertical(viewport, 0), horizontal(viewport, 0)], paint(colors.ink, 0.8), 1.4)
  for (const drawing of drawings) edge(context, scene, drawing)
  labelAxes(context, scene, { across, up, step, origin })
}

/** Lines on whole device pixels stay hairlines. */
const crisp = (value: number) => Math.round(value) + 0.5

function vertical(viewport: Viewport, re: number): [ScreenPoint, ScreenPoint] {
  const x = crisp(toScreen(viewport, { re, im: 0 }).x)
  return [{ x, y: 0 }, { x, y: viewport.height }]
}

function horizontal(viewport: Viewport, im: number): [ScreenPoint, ScreenPoint] {
  const y = crisp(toScreen(viewport, { re: 0, im }).y)
  return [{ x: 0, y }, { x: viewport.width, y }]
}

function hatch(context: Context, { colors }: GroundScene, drawing: RegionDrawing, origin: ScreenPoint): void {
  const lines = drawing.polygons.flatMap(polygon => hatchLines(polygon, hatchSpacing, drawing.lean, origin))
  strokeLines(context, lines, paint(colors.slate, 0.22), 1)
}

/** The limit line, and its words along it on the forbidden side. */
function edge(context: Context, { viewport, colors }: GroundScene, drawing: RegionDrawing): void {
  const view = { left: 0, top: 0, right: viewport.width, bottom: viewport.height }
  const shown = drawing.edges.map(([a, b]) => clipSegment(a, b, view)).filter(piece => piece !== null)
  strokeLines(context, shown, paint(colors.slate, 0.9), 1.2)
  const piece = shown[shown.length - 1]
  if (!piece) return
  const [inner, outer] = piece
  const length = Math.hypot(outer.x - inner.x, outer.y - inner.y)
  context.font = font(12)
  const words = drawing.labels.find(label => context.measureText(label).width + 40 <= length)
  if (!words) return
  let angle = Math.atan2(outer.y - inner.y, outer.x - inner.x)
  const flipped = Math.cos(angle) < -1e-9
  if (flipped) angle += Math.PI
  const width = context.measureText(words).width
  const along = drawing.lean === 'falling' ? 16 : Math.max(0, length - width - 24)
  const middle = along + width / 2
  context.save()
  context.translate(inner.x + (outer.x - inner.x) * middle / length, inner.y + (outer.y - inner.y) * middle / length)
  context.rotate(angle)
  writeText(context, words, { x: -width / 2, y: drawing.labelBelow !== flipped ? 12 : -11 }, { color: paint(colors.slate), halo: paint(colors.paper) })
  context.restore()
}

interface Marks {
  across: number[]
  up: number[]
  step: number
  origin: ScreenPoint
}

/** Numbers beside the axes; where an axis is out of view they stand at the edge nearest to it. */
function labelAxes(context: Context, { viewport, colors }: GroundScene, { across, up, step, origin }: Marks): void {
  context.font = font(12)
  const style = { color: paint(colors.slate), halo: paint(colors.paper) }
  const y = Math.min(viewport.height - 12, Math.max(12, origin.y + 14))
  let taken = -Infinity
  for (const re of across) {
    const words = formatMark(re, step)
    const width = context.measureText(words).width
    const { x } = toScreen(viewport, { re, im: 0 })
    const at = re === 0 ? x - width - 6 : x - width / 2
    if (at < 4 || at + width > viewport.width - 4 || at < taken + 8) continue
    writeText(context, words, { x: at, y }, style)
    taken = at + width
  }
  for (const im of up) {
    if (im === 0) continue
    const words = formatImaginaryMark(im, step)
    const width = context.measureText(words).width
    const x = Math.min(viewport.width - width - 6, Math.max(6, origin.x + 8))
    const { y: at } = toScreen(viewport, { re: 0, im })
    if (at < 12 || at > viewport.height - 12 || Math.abs(at - y) < 14) continue
    writeText(context, words, { x, y: at }, style)
  }
}
