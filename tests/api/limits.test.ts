import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import type { ShareLink } from '#shared/schemas/link'
import type { Scenario } from '#shared/schemas/scenario'
import { slewDocument } from '../fixtures/document'
import { Client, register } from '../helpers/client'
import { startServer, type RunningServer } from '../helpers/server'

let server: RunningServer

beforeEach(async () => { server = await startServer({ environment: { NUXT_RATE_LIMITS: 'on' } }) })
afterEach(() => server.stop())

const statuses = async (times: number, call: (n: number) => Promise<{ status: number }>) => {
  const seen: number[] = []
  for (let n = 0; n < times; n += 1) seen.push((await call(n)).status)
  return seen
}

describe('limits', () => {
  it('never meet a hand: 120 designs at once are all admitted', async () => {
    const client = new Client(server.origin)
    const body = { loop: slewDocument.loop, controller: slewDocument.controller, designPoint: slewDocument.designPoint }
    const answers = await Promise.all(Array.from({ length: 120 }, () => client.post('/api/design/solve', body)))
    expect(new Set(answers.map(answer => answer.status))).toEqual(new Set([200]))
  })

  it('stop a flood of designs, and say when to come again', async () => {
    const client = new Client(server.origin)
    let refused
    // 1200 in five seconds are admitted; a body that is refused early counts as well and costs little.
    for (let round = 0; round < 200 && refused === undefined; round += 1) {
      const answers = await Promise.all(Array.from({ length: 50 }, () => client.post('/api/design/solve', {})))
      refused = answers.find(answer => answer.status === 429)
    }
    expect(refused?.body).toMatchObject({ statusCode: 429, statusMessage: 'Too Many Requests' })
    expect(Number(refused?.headers.get('retry-after'))).toBeGreaterThan(0)
  })

  it('forgive wrong guesses once the right password came', async () => {
    const person = await register(server.origin)
    const guess = (password: string) => new Client(server.origin).post('/api/auth/sign-in', { email: person.email, password })
    expect(await statuses(9, n => guess(`wrong ${n}`))).toEqual(Array(9).fill(401))
    expect((await guess(person.password)).status).toBe(200)
    expect(await statuses(2, n => guess(`wrong ${n}`))).toEqual([401, 401])
  })

  it('keep a guest from flooding a scenario with comments', async () => {
    const owner = await register(server.origin)
    const { id } = (await owner.post<Scenario>('/api/scenarios', { title: 'Busy', document: slewDocument })).body
    const { token } = (await owner.post<ShareLink>(`/api/scenarios/${id}/links`, { permission: 'comment' })).body
    const guest = new Client(server.origin)
    expect(await statuses(21, n => guest.post(`/api/shared/${token}/comments`, { name: 'Pell', body: `No. ${n}` })))
      .toEqual([...Array(20).fill(201), 429])
    expect((await owner.post(`/api/scenarios/${id}/comments`, { body: 'The owner still can' })).status).toBe(201)
  })
})

describe('behind a proxy of one\'s own', () => {
  it('the entry that the proxy wrote counts, not those that the caller invented before it', async () => {
    const proxied = await startServer({ environment: { NUXT_RATE_LIMITS: 'on', NUXT_TRUST_PROXY: 'true' } })
    const person = await register(proxied.origin)
    const guess = (forwarded: string) => new Client(proxied.origin)
      .send('POST', '/api/auth/sign-in', { email: person.email, password: 'wrong' }, { 'x-forwarded-for': forwarded })
    expect(await statuses(11, n => guess(`10.0.0.${n}, 192.0.2.1`))).toEqual([...Array(10).fill(401), 429])
    expect((await guess('10.0.0.1, 192.0.2.2')).status).toBe(401)
    await proxied.stop()
  })
})
