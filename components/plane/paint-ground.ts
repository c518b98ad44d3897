import type { Context } from 'konva/lib/Context'
import { clipSegment } from '~/utils/plane/clip'
import { hatchLines } from '~/utils/plane/hatch'
import { placeAlong, placesAlong, type AlongPlacement } from '~/utils/plane/labels'
import { drawRegion, type RegionDrawing } from '~/utils/plane/regions'
import { formatImaginaryMark, formatMark, gridStep, scaleMarks } from '~/utils/plane/scale'
import { boundsOf, toScreen, type ScreenPoint, type Viewport } from '~/utils/plane/viewport'
import { paint, type PlaneColors } from '~/utils/plane/colors'
import { font, strokeLines, writeText } from './paint-tools'
import type { GroundScene } from './plane-scene'

const hatchSpacing = 9
const leastGrid = 64
/** Numbers of an axis below the view stand above the line of hints and buttons. */
const footerHeight = 48

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
  writeEdges(context, scene, drawings, origin)
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
  strokeLines(context, lines, paint(colors.slate, 0.17), 1)
}

/** The limit lines, and the words of each along its last edge, on the forbidden side and clear of the other lines. */
function writeEdges(context: Context, { viewport, colors }: GroundScene, drawings: RegionDrawing[], origin: ScreenPoint): void {
  const view = { left: 0, top: 0, right: viewport.width, bottom: viewport.height }
  const edges = drawings.map(drawing => drawing.edges.map(([a, b]) => clipSegment(a, b, view)).filter(piece => piece !== null))
  strokeLines(context, edges.flat(), paint(colors.slate, 0.9), 1.2)
  context.font = font(12)
  const middle = { x: viewport.width / 2, y: viewport.height / 2 }
  // Dense places weigh more: words may cross a line where they must, but not other words.
  const places = (a: ScreenPoint, b: ScreenPoint, spacing = 8) => placesAlong(a, b, middle, viewport.width + viewport.height, spacing)
  const taken = [origin.y, origin.y + 14, viewport.height - 24].flatMap(y => places({ x: 0, y }, { x: viewport.width, y }, 2))
  drawings.forEach((drawing, index) => {
    const piece = edges[index]!.at(-1)
    const others = edges.flatMap((lines, other) => other === index ? [] : lines.flatMap(([a, b]) => places(a, b)))
    if (!piece) return
    const label = drawing.labels
      .map(words => ({ words, width: context.measureText(words).width }))
      .map(({ words, width }) => ({ words, width, placed: placeAlong(piece, width, drawing.labelRight, drawing.preferEnd, [...taken, ...others]) }))
      .reduce((best, next) => !best.placed || (next.placed && next.placed.covered < best.placed.covered - 6) ? next : best)
    if (label.placed) taken.push(...writeAlong(context, label.words, label.width, label.placed, colors).flatMap(([a, b]) => places(a, b, 2)))
  })
}

/** Writes the words of an edge and returns the line that they take up. */
function writeAlong(context: Context, words: string, width: number, { middle, angle, offset }: AlongPlacement, colors: PlaneColors): [ScreenPoint, ScreenPoint][] {
  context.save()
  context.translate(middle.x, middle.y)
  context.rotate(angle)
  writeText(context, words, { x: 0, y: offset }, { color: paint(colors.slate), halo: paint(colors.paper), align: 'center' })
  context.restore()
  const at = { x: middle.x - Math.sin(angle) * offset, y: middle.y + Math.cos(angle) * offset }
  const half = { x: Math.cos(angle) * width / 2, y: Math.sin(angle) * width / 2 }
  return [[{ x: at.x - half.x, y: at.y - half.y }, { x: at.x + half.x, y: at.y + half.y }]]
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
  const y = Math.min(viewport.height - footerHeight, Math.max(12, origin.y + 14))
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
    if (at < 12 || at > viewport.height - footerHeight + 12 || Math.abs(at - y) < 14) continue
    writeText(context, words, { x, y: at }, style)
  }
  writeText(context, 'rad/s', { x: viewport.width - 8, y: y - 26 }, { ...style, align: 'right' })
}
