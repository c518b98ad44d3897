import '../../helpers/auto-imports'
import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import type { Readings } from '#shared/control/types'
import type { FrequencyBody } from '#shared/schemas/design'
import { useFrequencyStore } from '~/stores/frequency'

interface Asked { body: FrequencyBody, answer: (value: unknown, status?: number) => void }

const readings = { gainCrossover: 2, phaseCrossover: 5, bandwidth: null } as Readings
const question = (k: number) => ({
  body: { loop: { plant: { form: 'coefficients' as const, numerator: [1], denominator: [1, 1, 0] } }, controller: { form: 'gain' as const }, gains: { k } },
  readings, stable: true,
})
const settle = () => vi.advanceTimersByTimeAsync(0)

describe('frequency store', () => {
  let asked: Asked[]
  let store: ReturnType<typeof useFrequencyStore>

  beforeEach(() => {
    setActivePinia(createPinia())
    vi.useFakeTimers()
    asked = []
    vi.stubGlobal('fetch', (_path: string, { body }: { body: string }) => new Promise(resolve => asked.push({
      body: JSON.parse(body) as FrequencyBody,
      answer: (value, status = 200) => resolve(new Response(JSON.stringify(value), { status })),
    })))
    store = useFrequencyStore()
    store.open = true
  })
  afterEach(() => {
    vi.unstubAllGlobals()
    vi.useRealTimers()
  })

  it('has one request in flight; only the newest gains wait, and old curves are told from new ones', async () => {
    for (let k = 1; k <= 5; k++) store.ask(question(k))
    expect(asked.map(({ body }) => body.gains)).toEqual([{ k: 1 }])
    await vi.advanceTimersByTimeAsync(400)
    expect(store.stale).toBe(true)
    asked[0]!.answer({ sensitivityPeakFrequency: 3 })
    await settle()
    expect(asked.map(({ body }) => body.gains)).toEqual([{ k: 1 }, { k: 5 }])
    asked[1]!.answer({ sensitivityPeakFrequency: 4 })
    await settle()
    expect([store.stale, store.answer?.response.sensitivityPeakFrequency]).toEqual([false, 4])
  })

  it('says why there is no answer', async () => {
    store.ask(question(0))
    asked[0]!.answer({ statusCode: 422, statusMessage: '', message: 'the gains are zero' }, 422)
    await settle()
    expect([store.refusal, store.stale, store.answer]).toEqual(['the gains are zero', true, null])
    store.ask(question(1))
    asked[1]!.answer({ sensitivityPeakFrequency: null })
    await settle()
    expect([store.refusal, store.stale]).toEqual([null, false])
  })

  it('links a frequency and the readings taken there, while it is open', async () => {
    store.ask(question(1))
    asked[0]!.answer({ sensitivityPeakFrequency: 3 })
    await settle()
    expect(store.marks).toEqual([
      { reading: 'phaseMarginDeg', frequency: 2 }, { reading: 'gainMarginDb', frequency: 5 }, { reading: 'sensitivityPeak', frequency: 3 },
    ])
    store.point(5.1)
    expect([store.isNear('gainMarginDb'), store.isNear('phaseMarginDeg')]).toEqual([true, false])
    store.close()
    store.point(5)
    expect([store.cursor, store.marks, store.isNear('gainMarginDb')]).toEqual([null, [], false])
  })
})
