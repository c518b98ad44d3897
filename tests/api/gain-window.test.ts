import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { GainWindow } from '#shared/control/types'
import type { ErrorBody } from '#shared/schemas/errors'
import { Client } from '../helpers/client'
import { startServer, type RunningServer } from '../helpers/server'

let server: RunningServer
let client: Client

beforeAll(async () => {
  server = await startServer()
  client = new Client(server.origin)
})
afterAll(() => server.stop())

const loop = { plant: { form: 'coefficients', numerator: [1], denominator: [1, 3, 2, 0] } }
const good = { loop, controller: { form: 'gain' }, designPoint: { dampingRatio: 0.5, naturalFrequency: 2 / 3 } }

describe('POST /api/design/gain-window', () => {
  it('tells the factors on the gain for which the requirements are met', async () => {
    // 1/(s² + 2 s): damping ratio 1/sqrt(k).
    const zeta = Math.log(10) / Math.hypot(Math.PI, Math.log(10))
    const { status, body } = await client.post<GainWindow>('/api/design/gain-window', {
      loop: { plant: { form: 'coefficients', numerator: [1], denominator: [1, 2, 0] } }, controller: { form: 'gain' }, designPoint: { re: -1, im: 1 },
      requirements: [{ reading: 'overshootPercent', limit: 'at-most', value: 10 }],
    })
    expect(status).toBe(200)
    expect(body.window).toHaveLength(1)
    expect(body.window[0]![0]).toBe(1e-3)
    expect(Math.abs(body.window[0]![1] * 2 * zeta ** 2 - 1)).toBeLessThan(1e-6)
    expect(body.byRequirement[0]).toMatchObject({ reading: 'overshootPercent', intervals: body.window })
    expect(body.tightest).toEqual({ below: null, above: 'overshootPercent' })
    expect((await client.post<ErrorBody>('/api/design/gain-window', { ...good, loop: {} })).status).toBe(400)
  })

  it('serves others while a costly gain window is computed, and refuses one that costs too much', async () => {
    const plant = { form: 'zeros-poles-gain', zeros: [], poles: Array.from({ length: 20 }, (_, i) => ({ re: -1 - 0.3 * i, im: 0 })), gain: 1e3 }
    const sensor = { form: 'zeros-poles-gain', zeros: [], poles: Array.from({ length: 20 }, (_, i) => ({ re: -50 - i, im: 0 })), gain: 1e30 }
    const costly = client.post<ErrorBody>('/api/design/gain-window', {
      ...good, loop: { plant, sensor, samplePeriod: 0.01, deadTime: 0.2999, computingDelay: 'one-sample', actuatorLimit: 1 },
      requirements: [{ reading: 'overshootPercent', limit: 'at-most', value: 10 }, { reading: 'settlingTime', limit: 'at-most', value: 5 }],
    })
    let answered = false
    costly.then(() => { answered = true })
    await new Promise(resolve => setTimeout(resolve, 50))
    expect((await client.get('/api/health')).status).toBe(200)
    expect(answered).toBe(false)
    const answer = await costly
    expect([200, 422]).toContain(answer.status)
  })
})
