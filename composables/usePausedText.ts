const pauses = { notes: 800, formula: 500 }

/**
 * Text that is taken over when the typing pauses, when the field is left, and when it goes away. It reaches only the document into which it was
 * typed: the next one may stand on the bench before the field of the last is gone.
 */
export function usePausedText({ kind, read, write }: { kind: keyof typeof pauses, read: () => string, write: (text: string) => void }) {
  const bench = useBenchStore()
  const text = ref(read())
  let typedInto: number | null = null
  let timer: ReturnType<typeof setTimeout> | undefined

  watch(read, (present) => {
    if (present !== text.value.trim()) text.value = present
  })

  function type(typed: string) {
    text.value = typed
    typedInto = bench.loads
    clearTimeout(timer)
    timer = setTimeout(commit, pauses[kind])
  }

  function commit() {
    clearTimeout(timer)
    const isMeant = typedInto === bench.loads
    typedInto = null
    if (isMeant && text.value !== read()) write(text.value)
  }

  onBeforeUnmount(commit)
  return { text, type, commit }
}
