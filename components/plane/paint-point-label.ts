import type { Context } from 'konva/lib/Context'
import { abs } from '#shared/numerics/complex'
import { formatAngle, formatNumber, formatPoint, placeLabel, placesAlong } from '~/utils/plane/labels'
import { rayAngle, visibleRay } from '~/utils/plane/ray'
import { toScreen, type ScreenPoint } from '~/utils/plane/viewport'
import { paint } from '~/utils/plane/colors'
import { gripLabel } from './paint-grip'
import { font, writeText } from './paint-tools'
import type { HandScene } from './plane-scene'

const near = 280
const clearance = 24

/** The design point's own words: its place, its natural frequency, and whether it is on the locus. */
export function paintPointLabel(context: Context, scene: HandScene): void {
  const { viewport, colors, point, stale } = scene
  const first = formatPoint(point)
  const second = `${formatNumber(abs(point))} rad/s · ${standing(scene)}`
  context.font = font(12)
  const small = context.measureText(second).width
  context.font = font(15, 700)
  const width = Math.max(small, context.measureText(first).width)
  const mark = toScreen(viewport, point)
  const placed = placeLabel(mark, { width, height: 36 }, clearance, takenPlaces(context, scene, mark), viewport, scene.memory.labelPlace)
  scene.memory.labelPlace = placed.index
  const x = placed.at.x + width * { left: 0, center: 0.5, right: 1 }[placed.align]
  const style = { halo: paint(colors.paper), align: placed.align }
  context.font = font(15, 700)
  writeText(context, first, { x, y: placed.at.y + 9 }, { ...style, color: paint(colors.vermilionInk) })
  context.font = font(12)
  writeText(context, second, { x, y: placed.at.y + 28 }, { ...style, color: paint(colors.slate, stale ? 0.7 : 1) })
}

function standing({ onLocus, leftoverDeg, stale }: HandScene): string {
  if (stale) return 'no answer yet'
  if (onLocus) return 'on the locus'
  return leftoverDeg === null ? 'off the locus' : `${formatAngle(leftoverDeg)} left over`
}

function takenPlaces(context: Context, scene: HandScene, mark: ScreenPoint): ScreenPoint[] {
  const { viewport, point, marks, roots, meetings, flags } = scene
  const places: ScreenPoint[] = []
  for (const angle of [rayAngle(point), -rayAngle(point)]) {
    const ray = visibleRay(viewport, angle)
    if (ray) places.push(...placesAlong(ray[0], ray[1], mark, near))
  }
  const label = gripLabel(context, scene)
  if (label) {
    const left = label.align === 'right' ? label.x - label.width : label.x
    for (const dy of [-8, 0, 8, 17, 24]) places.push(...placesAlong({ x: left, y: label.y + dy }, { x: left + label.width, y: label.y + dy }, mark, near))
  }
  for (const taken of [...marks, ...roots, ...meetings]) {
    const { x, y } = toScreen(viewport, taken)
    // A mark has some size: words beside it keep a little away.
    for (const [dx, dy] of [[0, 0], [-8, 0], [8, 0], [0, -8], [0, 8]] as const) places.push({ x: x + dx, y: y + dy })
  }
  for (const { foot, cloth } of flags) {
    places.push(...placesAlong(foot, cloth, mark, near))
    for (const dx of [8, 16, 24]) places.push(...placesAlong({ x: cloth.x + dx, y: cloth.y + 20 }, { x: cloth.x + dx, y: cloth.y }, mark, near))
  }
  const axis = toScreen(viewport, { re: 0, im: 0 })
  places.push(...placesAlong({ x: 0, y: axis.y }, { x: viewport.width, y: axis.y }, mark, near))
  places.push(...placesAlong({ x: axis.x, y: 0 }, { x: axis.x, y: viewport.height }, mark, near))
  return places
}
