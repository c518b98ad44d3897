import type { Complex } from '#shared/numerics/complex'
import { hitTest, nearestTick, type Targets } from './hit-test'
import { freePoint, pointOnRay, projectToRay, rayAngle, type RayAngle } from './ray'
import { holdAt, panBy, toScreen, toWorld, zoomAbout, type ScreenPoint, type Viewport } from './viewport'

/** What the hand is doing. A drag counts as one only after `moved`; a press without movement is a click. */
export type Gesture =
  | { kind: 'idle' }
  | { kind: 'dragging-point', pointer: number, pressedAt: ScreenPoint, began: Complex, offset: ScreenPoint, angle: RayAngle, tick: Complex | null, touch: boolean, moved: boolean }
  | { kind: 'turning-ray', pointer: number, pressedAt: ScreenPoint, began: Complex, frequency: number, angleOffset: number, touch: boolean, moved: boolean }
  | { kind: 'panning', pointer: number, pressedAt: ScreenPoint, began: Viewport, tick: Complex | null, touch: boolean, moved: boolean }
  | { kind: 'pinching', pointers: [number, number], began: Viewport, from: [ScreenPoint, ScreenPoint], now: [ScreenPoint, ScreenPoint] }
  | { kind: 'pinning', pointer: number, pressedAt: ScreenPoint }

export type GestureEvent =
  | { kind: 'press', pointer: number, at: ScreenPoint, touch: boolean }
  | { kind: 'drag', pointer: number, at: ScreenPoint, free: boolean }
  | { kind: 'release', pointer: number, at: ScreenPoint }
  | { kind: 'cancel' }

/** What is to be done about an event, in order. */
export type Plan =
  | { do: 'start' | 'end' }
  | { do: 'move', point: Complex, snapped: boolean }
  | { do: 'jump' | 'pin' | 'cancel', point: Complex }
  | { do: 'view', viewport: Viewport }

export interface GestureContext extends Targets {
  pinning: boolean
}

export interface Step {
  gesture: Gesture
  plans: Plan[]
}

const idle: Gesture = { kind: 'idle' }
const slop = { mouse: 3, touch: 8 }
const snapRadius = 8
/** The ray turns through the upper half plane, from a little above the positive real axis to the negative real axis. */
const leastAngle = 0.02
/** The design point keeps this distance from the origin, where a ray has no direction. */
const leastPixels = 2

/** One event of the hand: the state after it and what it asks for. Nothing is changed in place. */
export function stepGesture(gesture: Gesture, event: GestureEvent, context: GestureContext): Step {
  switch (event.kind) {
    case 'press': return press(gesture, event, context)
    case 'drag': return drag(gesture, event, context)
    case 'release': return release(gesture, event, context)
    case 'cancel': return cancel(gesture)
  }
}

function press(gesture: Gesture, event: GestureEvent & { kind: 'press' }, context: GestureContext): Step {
  if (gesture.kind !== 'idle') return secondPress(gesture, event, context)
  const { pointer, at, touch } = event
  if (context.pinning) return { gesture: { kind: 'pinning', pointer, pressedAt: at }, plans: [] }
  const hit = hitTest(at, context, touch)
  const common = { pointer, pressedAt: at, touch, moved: false }
  if (hit.kind === 'grip') {
    const angleOffset = rayAngle(context.designPoint) - angleAt(at, context.viewport)
    const frequency = Math.hypot(context.designPoint.re, context.designPoint.im)
    return { gesture: { kind: 'turning-ray', ...common, began: context.designPoint, frequency, angleOffset }, plans: [] }
  }
  if (hit.kind === 'plane') return { gesture: { kind: 'panning', ...common, began: context.viewport, tick: hit.tick }, plans: [] }
  const point = toScreen(context.viewport, context.designPoint)
  const offset = { x: point.x - at.x, y: point.y - at.y }
  return { gesture: { kind: 'dragging-point', ...common, began: context.designPoint, offset, angle: rayAngle(context.designPoint), tick: hit.tick }, plans: [] }
}

/** A second finger turns a pan, or a drag that has not moved yet, into a pinch. */
function secondPress(gesture: Gesture, event: GestureEvent & { kind: 'press' }, { viewport }: GestureContext): Step {
  if (gesture.kind === 'idle' || gesture.kind === 'pinching' || !event.touch || gesture.pointer === event.pointer) return { gesture, plans: [] }
  if (gesture.kind !== 'panning' && 'moved' in gesture && gesture.moved) return { gesture, plans: [] }
  const places: [ScreenPoint, ScreenPoint] = [lastPlace(gesture, viewport), event.at]
  return { gesture: { kind: 'pinching', pointers: [gesture.pointer, event.pointer], began: viewport, from: places, now: places }, plans: [] }
}

/** Where the first finger is now: a pan has moved the drawing along with it. */
function lastPlace(gesture: Exclude<Gesture, { kind: 'idle' } | { kind: 'pinching' }>, viewport: Viewport): ScreenPoint {
  return gesture.kind === 'panning' ? toScreen(viewport, toWorld(gesture.began, gesture.pressedAt)) : gesture.pressedAt
}

function drag(gesture: Gesture, event: GestureEvent & { kind: 'drag' }, context: GestureContext): Step {
  if (gesture.kind === 'pinching') return pinch(gesture, event)
  if (gesture.kind === 'idle' || gesture.kind === 'pinning' || gesture.pointer !== event.pointer) return { gesture, plans: [] }
  const far = Math.hypot(event.at.x - gesture.pressedAt.x, event.at.y - gesture.pressedAt.y)
  if (!gesture.moved && far <= slop[gesture.touch ? 'touch' : 'mouse']) return { gesture, plans: [] }
  if (gesture.kind === 'panning') {
    const viewport = panBy(gesture.began, event.at.x - gesture.pressedAt.x, event.at.y - gesture.pressedAt.y)
    return { gesture: { ...gesture, moved: true }, plans: [{ do: 'view', viewport }] }
  }
  const start: Plan[] = gesture.moved ? [] : [{ do: 'start' }]
  if (gesture.kind === 'turning-ray') {
    const angle = Math.min(Math.PI, Math.max(leastAngle, angleAt(event.at, context.viewport) + gesture.angleOffset))
    return {
      gesture: { ...gesture, moved: true },
      plans: [...start, { do: 'move', point: pointOnRay(angle, gesture.frequency), snapped: false }],
    }
  }
  const { point, snapped } = draggedTo(gesture, event, context)
  return { gesture: { ...gesture, angle: rayAngle(point), moved: true }, plans: [...start, { do: 'move', point, snapped }] }
}

function draggedTo(
  gesture: Gesture & { kind: 'dragging-point' }, event: GestureEvent & { kind: 'drag' }, context: GestureContext,
): { point: Complex, snapped: boolean } {
  const { viewport } = context
  const wanted = toWorld(viewport, { x: event.at.x + gesture.offset.x, y: event.at.y + gesture.offset.y })
  const least = leastPixels / viewport.scale
  if (event.free) return { point: freePoint(wanted, least), snapped: false }
  const point = projectToRay(wanted, gesture.angle, least)
  const tick = nearestTick(toScreen(viewport, point), context, snapRadius)
  return tick ? { point: tick.meeting, snapped: true } : { point, snapped: false }
}

/** The angle of a place on the screen as seen from the origin, in (-pi/2, 3 pi/2], so that it does not jump at the negative real axis. */
function angleAt(at: ScreenPoint, viewport: Viewport): number {
  const { re, im } = toWorld(viewport, at)
  const angle = Math.atan2(im, re)
  return angle <= -Math.PI / 2 ? angle + 2 * Math.PI : angle
}

function pinch(gesture: Gesture & { kind: 'pinching' }, event: GestureEvent & { kind: 'drag' }): Step {
  const which = gesture.pointers.indexOf(event.pointer)
  if (which < 0) return { gesture, plans: [] }
  const now: [ScreenPoint, ScreenPoint] = which === 0 ? [event.at, gesture.now[1]] : [gesture.now[0], event.at]
  const spread = ([a, b]: [ScreenPoint, ScreenPoint]) => Math.max(1, Math.hypot(a.x - b.x, a.y - b.y))
  const middle = ([a, b]: [ScreenPoint, ScreenPoint]) => ({ x: (a.x + b.x) / 2, y: (a.y + b.y) / 2 })
  const held = toWorld(gesture.began, middle(gesture.from))
  const zoomed = zoomAbout(gesture.began, middle(gesture.from), spread(now) / spread(gesture.from))
  return { gesture: { ...gesture, now }, plans: [{ do: 'view', viewport: holdAt(zoomed, held, middle(now)) }] }
}

function release(gesture: Gesture, event: GestureEvent & { kind: 'release' }, { viewport }: GestureContext): Step {
  if (gesture.kind === 'idle') return { gesture, plans: [] }
  if (gesture.kind === 'pinching') {
    const which = gesture.pointers.indexOf(event.pointer)
    if (which < 0) return { gesture, plans: [] }
    const rest = which === 0 ? 1 : 0
    return {
      gesture: { kind: 'panning', pointer: gesture.pointers[rest], pressedAt: gesture.now[rest], began: viewport, tick: null, touch: true, moved: true },
      plans: [],
    }
  }
  if (gesture.pointer !== event.pointer) return { gesture, plans: [] }
  if (gesture.kind === 'pinning') return { gesture: idle, plans: [{ do: 'pin', point: toWorld(viewport, event.at) }] }
  if (gesture.kind === 'turning-ray' || (gesture.kind === 'dragging-point' && gesture.moved)) {
    return { gesture: idle, plans: gesture.moved ? [{ do: 'end' }] : [] }
  }
  return { gesture: idle, plans: gesture.tick && !gesture.moved ? [{ do: 'jump', point: gesture.tick }] : [] }
}

/** Escape, or a pointer taken away by the system: everything returns to where the gesture began. */
function cancel(gesture: Gesture): Step {
  switch (gesture.kind) {
    case 'dragging-point':
    case 'turning-ray': return { gesture: idle, plans: gesture.moved ? [{ do: 'cancel', point: gesture.began }] : [] }
    case 'panning':
    case 'pinching': return { gesture: idle, plans: [{ do: 'view', viewport: gesture.began }] }
    default: return { gesture: idle, plans: [] }
  }
}
