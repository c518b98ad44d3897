import type { Ref } from 'vue'

/** The width and height of an element's content box in CSS pixels; 0 until it is mounted. */
export function useElementSize(element: Readonly<Ref<HTMLElement | null>>) {
  const width = ref(0)
  const height = ref(0)
  let observer: ResizeObserver | null = null
  onMounted(() => {
    observer = new ResizeObserver(([entry]) => {
      width.value = entry!.contentRect.width
      height.value = entry!.contentRect.height
    })
    if (element.value) observer.observe(element.value)
  })
  onBeforeUnmount(() => observer?.disconnect())
  return { width, height }
}
