import type { Context } from 'konva/lib/Context'
import { arrowHeads, drawnBranches, visibleBranches, type ArrowHead } from '~/utils/plane/locus'
import { gatherMarks, type Mark } from '~/utils/plane/marks'
import { isInView, toScreen } from '~/utils/plane/viewport'
import { paint } from '~/utils/plane/colors'
import { circle, font, strokeLines, tracePolyline, writeText } from './paint-tools'
import type { LocusScene } from './plane-scene'

const arrowSpacing = 220

/** The locus with the direction of growing gain, and the open-loop poles and zeros: what is fixed while the hand moves. */
export function paintLocus(context: Context, scene: LocusScene): void {
  const { viewport, colors, analysis } = scene
  if (!analysis) return
  const frame = { left: -8, top: -8, right: viewport.width + 8, bottom: viewport.height + 8 }
  const runs = visibleBranches(drawnBranches(analysis), viewport, frame)
  context.beginPath()
  for (const run of runs) tracePolyline(context, run)
  context.strokeStyle = paint(colors.slate)
  context.lineWidth = 2
  context.lineJoin = 'round'
  context.stroke()
  context.fillStyle = paint(colors.slate)
  for (const head of arrowHeads(runs, arrowSpacing)) arrow(context, head)
  for (const mark of gatherMarks(analysis.openLoop.poles)) poleMark(context, scene, mark)
  for (const mark of gatherMarks(analysis.openLoop.zeros)) zeroMark(context, scene, mark)
}

function arrow(context: Context, { x, y, angle }: ArrowHead): void {
  context.save()
  context.translate(x, y)
  context.rotate(angle)
  context.beginPath()
  context.moveTo(6, 0)
  context.lineTo(-4, -4.2)
  context.lineTo(-2, 0)
  context.lineTo(-4, 4.2)
  context.closePath()
  context.fill()
  context.restore()
}

function poleMark(context: Context, scene: LocusScene, mark: Mark): void {
  const { viewport, colors } = scene
  const { x, y } = toScreen(viewport, mark.point)
  if (!isInView(viewport, { x, y }, -12)) return
  const arm = 6
  const cross = [[{ x: x - arm, y: y - arm }, { x: x + arm, y: y + arm }], [{ x: x - arm, y: y + arm }, { x: x + arm, y: y - arm }]] as const
  context.lineCap = 'round'
  strokeLines(context, cross, paint(colors.paper), 6)
  strokeLines(context, cross, paint(colors.slate), 2.4)
  context.lineCap = 'butt'
  multiplicity(context, scene, mark)
}

function zeroMark(context: Context, scene: LocusScene, mark: Mark): void {
  const { viewport, colors } = scene
  const at = toScreen(viewport, mark.point)
  if (!isInView(viewport, at, -12)) return
  circle(context, at, 6.5)
  context.fillStyle = paint(colors.paper)
  context.fill()
  context.strokeStyle = paint(colors.slate)
  context.lineWidth = 2.4
  context.stroke()
  multiplicity(context, scene, mark)
}

function multiplicity(context: Context, { viewport, colors }: LocusScene, mark: Mark): void {
  if (mark.multiplicity < 2) return
  const { x, y } = toScreen(viewport, mark.point)
  context.font = font(12, 700)
  writeText(context, `×${mark.multiplicity}`, { x: x + 10, y: y - 12 }, { color: paint(colors.slate), halo: paint(colors.paper) })
}
