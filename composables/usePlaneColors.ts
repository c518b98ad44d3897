import type { ShallowRef } from 'vue'
import { readColors, readDayColors, type PlaneColors } from '~/utils/plane/colors'

/**
 * The colours of the drawing, kept true to the theme; the day's while the page is printed. `onPrint` is called when they must be on paper at
 * once. Null until the page is mounted.
 */
export function usePlaneColors(onPrint: () => void): { colors: Readonly<ShallowRef<PlaneColors | null>> } {
  const colors = shallowRef<PlaneColors | null>(null)
  let printing = false
  const refresh = () => {
    if (!printing) colors.value = readColors()
  }
  const print = () => {
    // Before the colours are read: reading them touches the theme, which the watch below would answer.
    printing = true
    colors.value = readDayColors()
    // The flush that carries the colours to the canvas runs before the browser goes on to print.
    void nextTick(onPrint)
  }
  const printed = () => {
    printing = false
    refresh()
  }
  const themeWatch = import.meta.client ? new MutationObserver(refresh) : null

  onMounted(() => {
    refresh()
    themeWatch?.observe(document.documentElement, { attributeFilter: ['data-theme'] })
    window.addEventListener('beforeprint', print)
    window.addEventListener('afterprint', printed)
    // A canvas does not ask for its fonts: fetch them, then paint again.
    const weights = [500, 600, 700].map(weight => document.fonts.load(`${weight} 12px Manrope`))
    void Promise.allSettled(weights).then(refresh)
  })
  onBeforeUnmount(() => {
    themeWatch?.disconnect()
    window.removeEventListener('beforeprint', print)
    window.removeEventListener('afterprint', printed)
  })
  return { colors }
}
