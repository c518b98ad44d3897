import type { FrequencyResponse, ReadingName, Readings } from '#shared/control/types'
import type { FrequencyBody } from '#shared/schemas/design'
import { askServer } from '~/utils/ask-server'
import type { FrequencyAnswer } from '~/utils/frequency/answer'
import { markedFrequencies, readingsNear } from '~/utils/frequency/marks'
import { newestWaits, type AskingState } from '~/utils/newest-waits'

/** The gains in the body are those of the readings. */
interface Question {
  body: FrequencyBody
  readings: Readings
  stable: boolean
}

/** The frequency view: the server's newest answer, and the frequency under the hand, which chart, plane and readings share. Nothing of this is saved. */
export const useFrequencyStore = defineStore('frequency', () => {
  const open = ref(false)
  const answer = shallowRef<FrequencyAnswer | null>(null)
  const refusal = ref<string | null>(null)
  const state = ref<AskingState>('idle')
  /** rad/s; null while no hand points at any. */
  const cursor = ref<number | null>(null)

  const asking = newestWaits<Question, FrequencyResponse>({
    ask: ({ body }, signal) => askServer('/api/loop/frequency', body, signal),
    onAnswer: (response, { readings, stable }) => {
      answer.value = markRaw({ response, readings, stable })
      refusal.value = null
    },
    onRefusal: ({ message }) => { refusal.value = message },
    onState: (now) => { state.value = now },
  })

  const stale = computed(() => state.value === 'waiting' || refusal.value !== null)
  const marks = computed(() => open.value && answer.value ? markedFrequencies(answer.value.readings, answer.value.response) : [])
  const near = computed(() => readingsNear(marks.value, cursor.value))

  /** What a pointer or the focus rests on; only while the view is open does anybody see it. */
  function point(frequency: number | null) {
    cursor.value = open.value ? frequency : null
  }

  function isNear(reading: ReadingName): boolean {
    return near.value.includes(reading)
  }

  function close() {
    asking.stop()
    open.value = false
    cursor.value = null
    answer.value = null
    refusal.value = null
  }

  return { open, answer, refusal, state, cursor, stale, marks, near, ask: asking.submit, point, isNear, close }
})
