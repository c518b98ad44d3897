const reconnectMs = [1_000, 2_000, 5_000, 10_000, 30_000]

/**
 * Listens to the events of a scenario for as long as the scope lives. After a break `onResume` is called, because events may
 * have been missed. The browser reconnects by itself after a lost line; a refused one is tried again here, ever more slowly.
 */
export function useEvents(options: { url: string, names: readonly string[], onEvent: (name: string, data: unknown) => void, onResume: () => void, onRefused?: () => void }) {
  let source: EventSource | null = null
  let timer: ReturnType<typeof setTimeout> | undefined
  let openedBefore = false
  let refusals = 0

  function open() {
    source = new EventSource(options.url)
    source.onopen = () => {
      refusals = 0
      if (openedBefore) options.onResume()
      openedBefore = true
    }
    source.onerror = () => {
      if (source?.readyState !== EventSource.CLOSED) return
      options.onRefused?.()
      timer = setTimeout(open, reconnectMs[Math.min(refusals++, reconnectMs.length - 1)])
    }
    for (const name of options.names) {
      source.addEventListener(name, event => options.onEvent(name, parse((event as MessageEvent<string>).data)))
    }
  }

  onMounted(open)
  onScopeDispose(() => {
    clearTimeout(timer)
    source?.close()
  })
}

function parse(text: string): unknown {
  try {
    return JSON.parse(text)
  } catch {
    return null
  }
}
