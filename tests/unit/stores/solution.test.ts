import '../../helpers/auto-imports'
import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import type { ErrorBody } from '#shared/schemas/errors'
import { useSolutionStore, type SolveQuestion } from '~/stores/solution'

interface Asked { body: SolveQuestion, answer: (value: unknown, status?: number) => void, fail: () => void }

const question = (re: number): SolveQuestion => ({
  loop: { plant: { form: 'coefficients', numerator: [1], denominator: [1, 1, 0] } }, controller: { form: 'gain' }, designPoint: { re, im: 1 },
})
const settle = () => vi.advanceTimersByTimeAsync(0)
const refusal: ErrorBody = {
  statusCode: 400, statusMessage: 'Bad Request', message: 'The formula cannot be read.',
  data: { issues: [{ path: 'loop.plant.expression', message: 'a parenthesis is missing', position: 7 }] },
}

describe('solution store', () => {
  let asked: Asked[]

  beforeEach(() => {
    setActivePinia(createPinia())
    vi.useFakeTimers()
    asked = []
    vi.stubGlobal('fetch', (_path: string, { body }: { body: string }) => new Promise((resolve, reject) => asked.push({
      body: JSON.parse(body) as SolveQuestion,
      answer: (value, status = 200) => resolve(new Response(JSON.stringify(value), { status })),
      fail: () => reject(new TypeError('fetch failed')),
    })))
  })
  afterEach(() => {
    vi.unstubAllGlobals()
    vi.useRealTimers()
  })

  it('has one request in flight; only the newest position waits', async () => {
    const store = useSolutionStore()
    for (let re = -1; re >= -10; re--) store.solve(question(re))
    expect(asked).toHaveLength(1)
    asked[0]!.answer({ gains: { k: 1 } })
    await settle()
    expect(asked.map(({ body }) => body.designPoint)).toEqual([{ re: -1, im: 1 }, { re: -10, im: 1 }])
    asked[1]!.answer({ gains: { k: 10 } })
    await settle()
    expect(asked).toHaveLength(2)
    expect(store.solution?.gains).toEqual({ k: 10 })
    expect([store.status, store.stale]).toEqual(['idle', false])
  })

  it('never goes back to figures of a loop that was replaced', async () => {
    const store = useSolutionStore()
    store.solve(question(-1))
    store.solve(question(-2), true)
    asked[1]!.answer({ gains: { k: 2 } })
    await settle()
    asked[0]!.answer({ gains: { k: 1 } })
    await settle()
    expect(store.solution?.gains).toEqual({ k: 2 })
  })

  it('keeps the last good design after a refusal, marked, with the fault at its field', async () => {
    const store = useSolutionStore()
    store.solve(question(-1))
    asked[0]!.answer({ gains: { k: 1 } })
    await settle()
    store.solve(question(-2))
    asked[1]!.answer(refusal, 400)
    await settle()
    expect([store.status, store.stale, store.solution?.gains, store.message]).toEqual(['failed', true, { k: 1 }, 'The formula cannot be read.'])
    expect(store.issueAt('loop.plant.expression')).toEqual({ path: 'loop.plant.expression', message: 'a parenthesis is missing', position: 7 })
    expect(store.issueAt('loop.plant')?.position).toBe(7)
    expect(store.issueAt('loop.plant.numerator')).toBeNull()
    store.solve(question(-3))
    asked[2]!.answer({ gains: { k: 3 } })
    await settle()
    expect([store.status, store.stale, store.issueAt('loop.plant.expression')]).toEqual(['idle', false, null])
  })

  it('waits for a server that is gone and recovers by itself', async () => {
    const store = useSolutionStore()
    store.solve(question(-1))
    asked[0]!.answer({ gains: { k: 1 } })
    await settle()
    store.solve(question(-2))
    asked[1]!.answer({ statusCode: 503 }, 503)
    await settle()
    expect([store.status, store.stale]).toEqual(['waiting', true])
    await vi.advanceTimersByTimeAsync(400)
    asked[2]!.fail()
    await settle()
    expect(store.status).toBe('waiting')
    await vi.advanceTimersByTimeAsync(1000)
    asked[3]!.answer({ gains: { k: 2 } })
    await settle()
    expect([store.status, store.stale, store.solution?.gains]).toEqual(['idle', false, { k: 2 }])
  })

  it('marks the design while a field holds no figure', () => {
    const store = useSolutionStore()
    store.solution = { gains: { k: 1 } } as never
    store.reportField('designPoint.re', '“x” is not a number')
    expect([store.stale, store.issueAt('designPoint.re')?.message]).toEqual([true, '“x” is not a number'])
    store.reportField('designPoint.re', null)
    expect(store.stale).toBe(false)
  })

  it('tells why given gains cannot be evaluated, and changes nothing shown', async () => {
    const store = useSolutionStore()
    const { loop, controller } = question(-1)
    const answer = store.evaluateGains({ loop, controller }, { k: -1 })
    asked[0]!.answer(refusal, 400)
    expect(await answer).toEqual({ message: 'The formula cannot be read.', issues: refusal.data!.issues })
    expect([store.status, store.solution]).toEqual(['idle', null])
  })
})
