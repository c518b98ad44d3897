import type { Ref } from 'vue'

/** Device pixels per CSS pixel; it changes with the zoom of the browser and from one screen to the next. */
export function usePixelRatio(): Readonly<Ref<number>> {
  const ratio = ref(1)
  let query: MediaQueryList | null = null

  const read = () => {
    query?.removeEventListener('change', read)
    ratio.value = window.devicePixelRatio
    // A query names one ratio: each answer asks for the next.
    query = matchMedia(`(resolution: ${window.devicePixelRatio}dppx)`)
    query.addEventListener('change', read)
  }
  onMounted(read)
  onBeforeUnmount(() => query?.removeEventListener('change', read))
  return ratio
}
