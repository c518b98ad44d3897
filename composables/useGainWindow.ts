import type { GainWindow, Gains } from '#shared/control/types'
import { askServer } from '~/utils/ask-server'
import { areGainsOf } from '~/utils/bench/controller-forms'

/** The room about some gains, with the gains that its factors multiply. */
export interface RoomAbout {
  gains: Gains
  window: GainWindow
}

const pauseMs = 250

/**
 * How far the gain may go before a requirement breaks. It is asked for when the hand rests, since a drag does not need it; what is shown meanwhile
 * belongs to the gains it was asked for.
 */
export function useGainWindow() {
  const bench = useBenchStore()
  const store = useSolutionStore()
  const room = shallowRef<RoomAbout | null>(null)
  let timer: ReturnType<typeof setTimeout> | undefined
  let underWay: AbortController | null = null

  async function ask() {
    const { loop, controller, requirements } = bench.document
    const gains = store.solution?.gains
    underWay?.abort()
    // An answer may lag behind a change of the form: its gains then belong to the form before.
    if (!gains || !areGainsOf(controller.form, gains) || store.stale || requirements.length === 0) {
      underWay = null
      room.value = null
      return
    }
    const own = underWay = new AbortController()
    try {
      const window = await askServer<GainWindow>('/api/design/gain-window', { loop, controller, gains, requirements }, own.signal)
      if (own === underWay) room.value = { gains, window }
    } catch {
      // The plate says by itself when the server does not answer or has nothing to say.
      if (own === underWay) room.value = null
    }
  }

  watch(() => [store.solution, bench.document.requirements, store.stale, bench.gestureStart], () => {
    clearTimeout(timer)
    if (bench.gestureStart === null) timer = setTimeout(() => void ask(), pauseMs)
  }, { immediate: import.meta.client })
  onScopeDispose(() => {
    clearTimeout(timer)
    underWay?.abort()
  })

  return { room }
}
