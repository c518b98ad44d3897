import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { BestPoint } from '#shared/control/best-point/types'
import type { BestLine } from '#shared/schemas/best'
import type { ErrorBody } from '#shared/schemas/errors'
import { Client } from '../helpers/client'
import { startServer, type RunningServer } from '../helpers/server'

let server: RunningServer
let client: Client

beforeAll(async () => {
  server = await startServer({ environment: { NUXT_RATE_LIMITS: 'on' } })
  client = new Client(server.origin)
})
afterAll(() => server.stop())

/** Rate feedback around a double integrator: the effort is wn², the damping ratio is free. */
const good = {
  loop: { plant: { form: 'coefficients', numerator: [1], denominator: [1, 0, 0] } }, controller: { form: 'rate' },
  designPoint: { dampingRatio: 0.6, naturalFrequency: 1 }, requirements: [{ reading: 'peakEffort', limit: 'at-most', value: 25 }], over: 'ray',
}

/** A search that takes long: twenty poles, and each place of the plane asks for three gains. */
const long = {
  ...good, over: 'plane', controller: { form: 'pid', integralToDerivativeRatio: 4, derivativeFilter: 0.001 },
  loop: { plant: { form: 'zeros-poles-gain', zeros: [], poles: [{ re: 0, im: 0 }, ...Array.from({ length: 18 }, (_, n) => ({ re: -3 - n, im: 0 }))], gain: 1e19 } },
}

function begin(body: object, signal?: AbortSignal) {
  return fetch(`${server.origin}/api/design/best`, { method: 'POST', headers: { 'content-type': 'application/json' }, body: JSON.stringify(body), signal })
}

async function search(body: object): Promise<{ progress: Extract<BestLine, { progress: number }>[], result: BestPoint }> {
  const answer = await begin(body)
  expect(answer.status).toBe(200)
  expect(answer.headers.get('content-type')).toMatch(/^application\/x-ndjson/)
  const lines = (await answer.text()).trimEnd().split('\n').map(line => JSON.parse(line) as BestLine)
  const last = lines.pop()!
  if (!('result' in last)) throw new Error(`The last line is ${JSON.stringify(last)}`)
  return { progress: lines as Extract<BestLine, { progress: number }>[], result: last.result }
}

describe('POST /api/design/best', () => {
  it('tells how far it is line by line, and at the end the point', async () => {
    const { progress, result } = await search({ ...good, over: 'plane' })
    expect(progress.length).toBeGreaterThan(0)
    for (const line of progress) expect(Object.keys(line).sort()).toEqual(['best', 'evaluations', 'progress'])
    expect(progress.every(({ progress: share }, n) => share >= (progress[n - 1]?.progress ?? 0) && share <= 1)).toBe(true)
    expect(Object.keys(result).sort()).toEqual([
      'best', 'binding', 'closest', 'cutShort', 'evaluations', 'hindrance', 'over', 'places', 'settlingTimeBefore', 'tied',
    ])
    expect(result.best!.designPoint.naturalFrequency).toBeCloseTo(5, 3)
    expect(result.binding).toEqual(['peakEffort'])
  })

  it('keeps to the ray, and to gains given in place of a point', async () => {
    const { result } = await search(good)
    expect(result.best!.designPoint.dampingRatio).toBeCloseTo(0.6, 12)
    const { designPoint: _, ...rest } = good
    const { result: again } = await search({ ...rest, gains: { kp: 1, kr: 1.2 } })
    expect(again.best!.designPoint.naturalFrequency).toBeCloseTo(result.best!.designPoint.naturalFrequency, 4)
  })

  it.each<[string, object, number, string]>([
    ['no room', { over: undefined }, 400, 'over'],
    ['an unknown room', { over: 'space' }, 400, 'over'],
    ['an unknown field', { colour: 'red' }, 400, 'colour'],
    ['a point below the axis', { designPoint: { re: -1, im: -1 } }, 400, 'designPoint.im'],
    ['neither point nor gains', { designPoint: undefined }, 400, 'designPoint'],
    ['gains of another form', { designPoint: undefined, gains: { k: 1 } }, 400, 'gains'],
    ['a zero denominator', { loop: { plant: { form: 'coefficients', numerator: [1], denominator: [0] } } }, 400, 'loop.plant.denominator'],
    ['a ray to the right', { designPoint: { re: 1, im: 1 } }, 422, 'designPoint'],
    ['a ray that meets no locus', { controller: { form: 'gain' } }, 422, 'designPoint'],
  ])('refuses %s before the first line, in JSON', async (_what, change, status, path) => {
    const answer = await client.post<ErrorBody>('/api/design/best', { ...good, ...change })
    expect(answer.status).toBe(status)
    expect(answer.body.data?.issues?.map(issue => issue.path)).toContain(path)
  })

  it('stops working when the caller leaves, and serves others meanwhile', async () => {
    // Two at a time are admitted, and twelve of these would take minutes: each gives its place free only by ending when it is left.
    for (let round = 0; round < 12; round += 1) {
      const abort = new AbortController()
      let answer = await begin(long, abort.signal)
      while (answer.status === 429) {
        await answer.text()
        answer = await begin(long, abort.signal)
      }
      expect(answer.status).toBe(200)
      await answer.body!.getReader().read()
      expect((await client.get('/api/health')).status).toBe(200)
      abort.abort()
    }
  })

  it('admits two searches at a time from one address', async () => {
    const aborts = [new AbortController(), new AbortController()]
    const running = []
    for (const { signal } of aborts) {
      let answer = await begin(long, signal)
      while (answer.status === 429) answer = await begin(long, signal)
      running.push(answer.status)
    }
    const third = await client.post<ErrorBody>('/api/design/best', good)
    for (const abort of aborts) abort.abort()
    expect([...running, third.status]).toEqual([200, 200, 429])
    expect(Number(third.headers.get('retry-after'))).toBeGreaterThan(0)
  })
})
