import type { ShallowRef } from 'vue'
import type { Complex } from '#shared/numerics/complex'
import type { LoopAnalysis } from '#shared/control/types'
import { fitView, isAnotherLoop } from '~/utils/plane/fit'
import { holdAt, isInView, resize, toScreen, zoomAbout, type ScreenPoint, type Viewport } from '~/utils/plane/viewport'

interface PlaneViewOptions {
  element: Readonly<ShallowRef<HTMLElement | null>>
  analysis: () => LoopAnalysis | null
  designPoint: () => Complex
  /** While the hand is on the drawing the view never moves by itself. */
  busy: () => boolean
}

export interface PlaneView {
  /** Null until the size of the element is known. */
  viewport: Readonly<ShallowRef<Viewport | null>>
  show: (viewport: Viewport) => void
  fit: () => void
  zoom: (factor: number, at?: ScreenPoint) => void
  centre: () => void
}

/** What the plane shows: fitted to each new loop, then left to the hand. */
export function usePlaneView({ element, analysis, designPoint, busy }: PlaneViewOptions): PlaneView {
  const viewport = shallowRef<Viewport | null>(null)
  /** Nobody has panned or zoomed since the last fit, so that a new size may fit again. */
  let untouched = true
  let fittedTo: LoopAnalysis | null = null

  const show = (next: Viewport) => {
    viewport.value = next
    untouched = false
  }
  const fitInto = (width: number, height: number) => {
    fittedTo = analysis()
    viewport.value = fitView(fittedTo, designPoint(), width, height)
    untouched = true
  }
  const fit = () => {
    if (viewport.value) fitInto(viewport.value.width, viewport.value.height)
  }
  const zoom = (factor: number, at?: ScreenPoint) => {
    const view = viewport.value
    if (!view) return
    const point = toScreen(view, designPoint())
    const middle = { x: view.width / 2, y: view.height / 2 }
    show(zoomAbout(view, at ?? (isInView(view, point) ? point : middle), factor))
  }
  const centre = () => {
    const view = viewport.value
    if (view) show(holdAt(view, designPoint(), { x: view.width / 2, y: view.height / 2 }))
  }

  watch(analysis, (now) => {
    if (!busy() && isAnotherLoop(fittedTo, now)) fit()
  })
  watch(designPoint, (point) => {
    const view = viewport.value
    if (view && !busy() && !isInView(view, toScreen(view, point))) fit()
  })

  let sizeWatch: ResizeObserver | null = null
  onMounted(() => {
    sizeWatch = new ResizeObserver(([entry]) => {
      if (!entry) return
      const { width, height } = entry.contentRect
      if (width < 1 || height < 1) return
      if (!viewport.value || (untouched && !busy())) fitInto(width, height)
      else viewport.value = resize(viewport.value, width, height)
    })
    if (element.value) sizeWatch.observe(element.value)
  })
  onBeforeUnmount(() => sizeWatch?.disconnect())
  return { viewport, show, fit, zoom, centre }
}
