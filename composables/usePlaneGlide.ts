import type { ShallowRef } from 'vue'
import type { Complex } from '#shared/numerics/complex'

const glideMilliseconds = 120

/**
 * The place where the design point is drawn. It follows at once, or glides where a jump would be hard to follow: at a snap, a tick, an undo.
 * With reduced motion it never glides.
 */
export function usePlaneGlide(start: Complex): { drawn: Readonly<ShallowRef<Complex>>, follow: (point: Complex, glide: boolean) => void } {
  const drawn = shallowRef(start)
  let frame = 0

  const follow = (point: Complex, glide: boolean) => {
    cancelAnimationFrame(frame)
    if (!glide || matchMedia('(prefers-reduced-motion: reduce)').matches) {
      drawn.value = point
      return
    }
    const from = drawn.value
    const began = performance.now()
    const advance = (now: number) => {
      const t = Math.min(1, Math.max(0, (now - began) / glideMilliseconds))
      const eased = 1 - (1 - t) ** 3
      drawn.value = t === 1 ? point : { re: from.re + eased * (point.re - from.re), im: from.im + eased * (point.im - from.im) }
      if (t < 1) frame = requestAnimationFrame(advance)
    }
    frame = requestAnimationFrame(advance)
  }
  onBeforeUnmount(() => cancelAnimationFrame(frame))
  return { drawn, follow }
}
