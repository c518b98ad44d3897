import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { Client, register } from '../helpers/client'
import { startServer, type RunningServer } from '../helpers/server'

let server: RunningServer

beforeAll(async () => { server = await startServer() })
afterAll(() => server.stop())

const account = { name: 'Imke Daal', email: 'imke@example.org', password: 'correct horse battery' }

describe('registering', () => {
  it('signs the new person in under an HttpOnly, SameSite cookie of at most 4096 bytes', async () => {
    const client = new Client(server.origin)
    const answer = await client.post('/api/auth/register', { ...account, email: ' IMKE@example.org ' })
    expect(answer.status).toBe(201)
    expect(answer.body).toEqual({ user: { name: account.name, email: account.email } })
    const cookie = answer.headers.getSetCookie()[0] ?? ''
    expect(cookie).toMatch(/; HttpOnly/)
    expect(cookie).toMatch(/; SameSite=Lax/)
    expect(cookie.length).toBeLessThanOrEqual(4096)
    expect((await client.get('/api/auth/me')).body).toEqual({ user: { name: account.name, email: account.email } })
  })

  it('refuses an address that has an account, and names the field', async () => {
    const client = new Client(server.origin)
    const first = { ...account, email: 'twice@example.org' }
    await client.post('/api/auth/register', first)
    const answer = await new Client(server.origin).post('/api/auth/register', first)
    expect(answer.status).toBe(400)
    expect(answer.body).toMatchObject({ statusCode: 400, data: { issues: [{ path: 'email' }] } })
  })

  it.each([
    ['a short password', { ...account, password: 'seven77' }, 'password'],
    ['a password of 129 characters', { ...account, password: 'x'.repeat(129) }, 'password'],
    ['one of the commonest passwords', { ...account, email: 'c@example.org', password: 'Password123' }, 'password'],
    ['no name', { ...account, name: '  ' }, 'name'],
    ['no address', { ...account, email: 'imke' }, 'email'],
    ['an unknown field', { ...account, role: 'owner' }, 'role'],
  ])('refuses %s', async (_what, body, path) => {
    const answer = await new Client(server.origin).post('/api/auth/register', body)
    expect(answer.status).toBe(400)
    expect(answer.body).toMatchObject({ data: { issues: [{ path }] } })
  })
})

describe('signing in and out', () => {
  it('looks the same for an unknown account and a wrong password', async () => {
    const person = await register(server.origin)
    const wrong = await new Client(server.origin).post('/api/auth/sign-in', { email: person.email, password: 'not this one' })
    const unknown = await new Client(server.origin).post('/api/auth/sign-in', { email: 'nobody@example.org', password: 'not this one' })
    expect([wrong.status, unknown.status]).toEqual([401, 401])
    expect(wrong.body).toEqual(unknown.body)
  })

  it('makes a new session id, and signing out kills a replayed cookie', async () => {
    const person = await register(server.origin)
    const before = person.cookie
    await person.post('/api/auth/sign-in', { email: person.email, password: person.password })
    const during = person.cookie
    expect(during).not.toBe(before)
    const replay = (cookie: string) => new Client(server.origin).send('GET', '/api/auth/me', undefined, { cookie })
    expect((await replay(before)).body).toEqual({ user: null })
    expect((await replay(during)).body).toMatchObject({ user: { email: person.email } })
    expect((await person.post('/api/auth/sign-out')).status).toBe(200)
    expect((await replay(during)).body).toEqual({ user: null })
    expect((await new Client(server.origin).send('GET', '/api/scenarios', undefined, { cookie: during })).status).toBe(401)
  })

  it('does not tell the session id to scripts', async () => {
    const person = await register(server.origin)
    const answer = await person.get('/api/_auth/session')
    expect(JSON.stringify(answer.body)).not.toContain('sid')
  })
})

describe('what comes from elsewhere', () => {
  it('refuses writes that a browser says come from another site', async () => {
    const person = await register(server.origin)
    const cross = await person.send('POST', '/api/auth/sign-out', {}, { 'sec-fetch-site': 'cross-site' })
    expect(cross.status).toBe(403)
    const origin = await person.send('POST', '/api/auth/sign-out', {}, { origin: 'https://elsewhere.example' })
    expect(origin.status).toBe(403)
    expect((await person.get('/api/auth/me')).body).toMatchObject({ user: { email: person.email } })
  })

  it('refuses bodies that are not JSON by type or by content', async () => {
    const client = new Client(server.origin)
    const form = await client.raw('POST', '/api/auth/sign-in', 'email=a', { 'content-type': 'application/x-www-form-urlencoded' })
    expect(form.status).toBe(415)
    const broken = await client.raw('POST', '/api/auth/sign-in', '{"email":', { 'content-type': 'application/json' })
    expect(broken.status).toBe(400)
    expect(JSON.stringify(broken.body)).not.toContain('at JSON.parse')
    const list = await client.raw('POST', '/api/auth/sign-in', '[]', { 'content-type': 'application/json' })
    expect(list.status).toBe(400)
    const large = await client.raw('POST', '/api/auth/sign-in', `"${'x'.repeat(300_000)}"`, { 'content-type': 'application/json' })
    expect(large.status).toBe(413)
  })

  it('answers 404 in JSON for an address that is not there', async () => {
    const answer = await new Client(server.origin).get('/api/nothing/here')
    expect(answer.status).toBe(404)
    expect(answer.body).toEqual({ statusCode: 404, statusMessage: 'Not Found', message: 'There is no such address in this interface.' })
  })
})

describe('limits', () => {
  it('slows guesses down without locking the owner out from elsewhere, and a forged X-Forwarded-For does not escape', async () => {
    const limited = await startServer({ environment: { NUXT_RATE_LIMITS: 'on' } })
    try {
      const person = await register(limited.origin)
      const guess = (n: number) => new Client(limited.origin)
        .send('POST', '/api/auth/sign-in', { email: person.email, password: `guess ${n}` }, { 'x-forwarded-for': `10.0.0.${n}` })
      const statuses: number[] = []
      for (let n = 0; n < 11; n += 1) statuses.push((await guess(n)).status)
      expect(statuses).toEqual([...Array(10).fill(401), 429])
      expect(Number((await guess(12)).headers.get('retry-after'))).toBeGreaterThan(0)
      expect((await person.get('/api/auth/me')).body).toMatchObject({ user: { email: person.email } })
    } finally {
      await limited.stop()
    }
  })
})
