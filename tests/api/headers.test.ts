import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { ShareLink } from '#shared/schemas/link'
import type { Scenario } from '#shared/schemas/scenario'
import { slewDocument } from '../fixtures/document'
import { Client, register } from '../helpers/client'
import { startServer, type RunningServer } from '../helpers/server'

let server: RunningServer
let guest: Client
let owner: Awaited<ReturnType<typeof register>>
let link: ShareLink

beforeAll(async () => {
  server = await startServer()
  guest = new Client(server.origin)
  owner = await register(server.origin)
  const { id } = (await owner.post<Scenario>('/api/scenarios', { title: '</script><script>alert(1)</script>', document: slewDocument })).body
  link = (await owner.post<ShareLink>(`/api/scenarios/${id}/links`, { permission: 'view' })).body
})
afterAll(() => server.stop())

const policyOf = (headers: Headers) => new Map((headers.get('content-security-policy') ?? '').split('; ').map((directive) => {
  const [name = '', ...values] = directive.split(' ')
  return [name, values]
}))

describe.each([['the bench', '/'], ['an address that is not there', '/nowhere']])('the page of %s', (_what, path) => {
  it('runs only scripts that carry the nonce of this very answer', async () => {
    const page = () => guest.send<string>('GET', path, undefined, { accept: 'text/html' })
    const [first, second] = [await page(), await page()]
    const policy = policyOf(first.headers)
    const [own, nonce = ''] = policy.get('script-src') ?? []
    expect(own).toBe(`'self'`)
    expect(nonce).toMatch(/^'nonce-[\w+/=]{24}'$/)
    expect(policyOf(second.headers).get('script-src')?.[1]).not.toBe(nonce)
    for (const name of ['object-src', 'base-uri', 'frame-ancestors']) expect(policy.get(name)).toEqual([`'none'`])
    const scripts = String(first.body).match(/<script\b[^>]*>/g) ?? []
    expect(scripts.length).toBeGreaterThan(0)
    for (const script of scripts) expect(script).toContain(`nonce="${nonce.slice(7, -1)}"`)
  })

  it('is not sniffed, not framed, and says nothing of what made it', async () => {
    const { headers } = await guest.get(path)
    expect(headers.get('x-content-type-options')).toBe('nosniff')
    expect(headers.get('x-frame-options')).toBe('DENY')
    expect(headers.get('cross-origin-opener-policy')).toBe('same-origin')
    expect(headers.get('x-powered-by')).toBeNull()
    expect(headers.get('strict-transport-security')).toBeNull()
  })
})

describe('a shared scenario', () => {
  it('sends no referrer, is not indexed, is not stored, and its title stays text', async () => {
    const { headers, body } = await guest.get<string>(`/s/${link.token}`)
    expect(headers.get('referrer-policy')).toBe('no-referrer')
    expect(headers.get('x-robots-tag')).toContain('noindex')
    expect(headers.get('cache-control')).toBe('no-store')
    expect(body).not.toContain('<script>alert(1)')
  })
})

describe('guests', () => {
  it.each(['/', '/api/auth/me', '/api/scenarios'])('get no cookie at %s', async (path) => {
    expect((await new Client(server.origin).get(path)).headers.getSetCookie()).toEqual([])
  })

  it('get none on a shared scenario', async () => {
    for (const path of [`/s/${link.token}`, `/api/shared/${link.token}`, `/api/shared/${link.token}/comments`]) {
      expect((await new Client(server.origin).get(path)).headers.getSetCookie()).toEqual([])
    }
  })
})

describe('static files', () => {
  it('are kept for long and not sniffed', async () => {
    const [, script = ''] = /src="(\/_nuxt\/[^"]+\.js)"/.exec(String((await guest.get('/')).body)) ?? []
    const { status, headers } = await guest.get(script)
    expect(status).toBe(200)
    expect(headers.get('cache-control')).toContain('immutable')
    expect(headers.get('x-content-type-options')).toBe('nosniff')
  })
})

describe('over https', () => {
  it('binds the cookie to the host, asks for https for a year, and makes links of the configured site', async () => {
    const secure = await startServer({ environment: { NUXT_PUBLIC_SITE_URL: 'https://bench.example' } })
    const person = await register(secure.origin)
    const signedIn = await person.post('/api/auth/sign-in', { email: person.email, password: person.password })
    expect(signedIn.headers.getSetCookie().at(-1)).toMatch(/^__Host-polewright=.*; Path=\/; .*HttpOnly; Secure; SameSite=Lax$/)
    expect(signedIn.headers.get('strict-transport-security')).toMatch(/^max-age=31536000/)
    expect((await person.get('/api/auth/me')).body).toMatchObject({ user: { email: person.email } })
    const own = await person.send<Scenario>('POST', '/api/scenarios', { title: 'Linked', document: slewDocument }, { origin: 'https://bench.example' })
    expect(own.status).toBe(201)
    const { url, token } = (await person.post<ShareLink>(`/api/scenarios/${own.body.id}/links`, { permission: 'view' })).body
    expect(url).toBe(`https://bench.example/s/${token}`)
    await secure.stop()
  })
})

describe('odd requests', () => {
  it.each([['PUT', '/api/scenarios', 'GET, POST'], ['DELETE', '/api/auth/me', 'GET'], ['GET', '/api/design/solve', 'POST'], ['PUT', '/api/scenarios/abc', 'DELETE, GET, PATCH']])(
    '%s %s: the address is there, the method is not', async (method, path, allow) => {
      const answer = await guest.send(method, path)
      expect([answer.status, answer.headers.get('allow')]).toEqual([405, allow])
      expect(answer.body).toMatchObject({ statusCode: 405, statusMessage: 'Method Not Allowed' })
    })

  it.each(['/api', '/api/', '/api/scenarios/%E0%A4%A', '/api/shared/%00', '/api/shared/..%2f..', '/api/scenarios?page=1e99', '/api/scenarios?search=a&search=b'])(
    '%s is answered in the form of docs/http-contract.md, and is no fault of the server', async (path) => {
      const { status, body } = await owner.get(path)
      expect([400, 404]).toContain(status)
      expect(body).toMatchObject({ statusCode: status, message: expect.any(String) })
    })

  it('lets nobody send a form, or plain text, to any address that changes something', async () => {
    for (const path of ['/api/auth/sign-out', `/api/shared/${link.token}/comments`, '/api/scenarios', '/api/design/solve']) {
      const answer = await owner.raw('POST', path, 'a=b', { 'content-type': 'text/plain' })
      expect([path, answer.status]).toEqual([path, 415])
    }
    expect((await owner.get('/api/auth/me')).body).toMatchObject({ user: { email: owner.email } })
  })

  it('answers a stream of unknown length that grows too large, and serves on', async () => {
    const body = new ReadableStream({
      start(controller) {
        for (let n = 0; n < 20; n += 1) controller.enqueue(new TextEncoder().encode(' '.repeat(50_000)))
        controller.close()
      },
    })
    const response = await fetch(`${server.origin}/api/auth/sign-in`, {
      method: 'POST', headers: { 'content-type': 'application/json' }, body, duplex: 'half',
    } as RequestInit)
    expect(response.status).toBe(413)
    expect(server.log()).not.toContain('uncaughtException')
  })
})
