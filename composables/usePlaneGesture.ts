import type { ShallowRef } from 'vue'
import { stepGesture, type Gesture, type GestureContext, type GestureEvent, type Plan } from '~/utils/plane/gestures'
import type { ScreenPoint } from '~/utils/plane/viewport'

interface PlaneGestureOptions {
  element: Readonly<ShallowRef<HTMLElement | null>>
  /** Null while there is nothing to take hold of. */
  context: () => GestureContext | null
  /** The point is free of its ray. */
  free: (event: PointerEvent) => boolean
  /** Whether a press may begin here; a finger in the gutters scrolls the page. */
  accepts: (at: ScreenPoint, touch: boolean) => boolean
  perform: (plan: Plan) => void
}

interface PlaneGesture {
  gesture: Readonly<ShallowRef<Gesture>>
  place: (event: MouseEvent) => ScreenPoint
  press: (event: PointerEvent) => void
  drag: (event: PointerEvent) => void
  release: (event: PointerEvent) => void
  cancel: () => void
}

/** Pointer events into the steps of a gesture, and its plans into deeds. */
export function usePlaneGesture({ element, context, free, accepts, perform }: PlaneGestureOptions): PlaneGesture {
  const gesture = shallowRef<Gesture>({ kind: 'idle' })

  const place = (event: MouseEvent): ScreenPoint => {
    const box = element.value?.getBoundingClientRect()
    return { x: event.clientX - (box?.left ?? 0), y: event.clientY - (box?.top ?? 0) }
  }
  const step = (event: GestureEvent) => {
    const now = context()
    if (!now) return
    const { gesture: next, plans } = stepGesture(gesture.value, event, now)
    gesture.value = next
    plans.forEach(perform)
  }
  const press = (event: PointerEvent) => {
    const at = place(event)
    const touch = event.pointerType === 'touch'
    if (event.button !== 0 || !accepts(at, touch)) return
    element.value?.setPointerCapture(event.pointerId)
    step({ kind: 'press', pointer: event.pointerId, at, touch })
  }
  const drag = (event: PointerEvent) => step({ kind: 'drag', pointer: event.pointerId, at: place(event), free: free(event) })
  const release = (event: PointerEvent) => step({ kind: 'release', pointer: event.pointerId, at: place(event) })
  const cancel = () => step({ kind: 'cancel' })
  return { gesture, place, press, drag, release, cancel }
}
