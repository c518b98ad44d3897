import { once } from 'node:events'
import { cpSync, existsSync, readFileSync, statSync } from 'node:fs'
import { connect } from 'node:net'
import { fileURLToPath } from 'node:url'
import Database from 'better-sqlite3'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import type { Scenario, ScenarioPage } from '#shared/schemas/scenario'
import { slewDocument } from '../fixtures/document'
import { Client, register } from '../helpers/client'
import { temporaryFolder } from '../helpers/database'
import { readEvents } from '../helpers/events'
import { startServer } from '../helpers/server'

const built = fileURLToPath(new URL('../../.output', import.meta.url))
let place: ReturnType<typeof temporaryFolder>

beforeEach(() => { place = temporaryFolder() })
afterEach(() => place.remove())

describe('the built folder', () => {
  it('copied elsewhere, starts, migrates and serves', async () => {
    cpSync(built, place.file('elsewhere'), { recursive: true })
    const server = await startServer({ entry: place.file('elsewhere/server/index.mjs'), databasePath: place.file('data/polewright.db') })
    const person = await register(server.origin)
    expect((await person.post('/api/scenarios', { title: 'Kept', document: slewDocument })).status).toBe(201)
    expect((await person.get('/')).status).toBe(200)
    expect(existsSync(place.file('data/polewright.db'))).toBe(true)
    await server.stop()
  })

  it('makes and keeps a key for the cookies, for its owner alone, so that a restart signs nobody out', async () => {
    const databasePath = place.file('data/polewright.db')
    const first = await startServer({ databasePath })
    const person = await register(first.origin)
    await first.stop()
    expect(statSync(place.file('data/session-password')).mode & 0o077).toBe(0)
    const second = await startServer({ databasePath })
    const { body } = await new Client(second.origin).send('GET', '/api/auth/me', undefined, { cookie: person.cookie })
    expect(body).toEqual({ user: { name: 'Runa Holt', email: person.email } })
    await second.stop()
  })

  it.each([
    [{ NUXT_SESSION_PASSWORD: 'too short' }, '32 characters'],
    [{ NUXT_PUBLIC_SITE_URL: 'polewright.example' }, 'http:// or https://'],
    [{ NUXT_RATE_LIMITS: 'maybe' }, '"on" or "off"'],
  ])('does not start with the settings %j, and says why', async (environment: Record<string, string>, why) => {
    await expect(startServer({ environment })).rejects.toThrow(why)
  })
})

describe('stopping', () => {
  it('on SIGTERM ends streams and idle connections, writes the log back, and exits with 0', async () => {
    const databasePath = place.file('polewright.db')
    const server = await startServer({ databasePath })
    const person = await register(server.origin)
    const { id } = (await person.post<Scenario>('/api/scenarios', { title: 'Watched', document: slewDocument })).body
    const stream = await readEvents(`${server.origin}/api/scenarios/${id}/events`, person.cookie)
    const idle = connect(Number(new URL(server.origin).port), '127.0.0.1')
    await once(idle, 'connect')
    const exit = server.stop('SIGTERM')
    expect(await stream.ended()).toBe(true)
    expect(await exit).toBe(0)
    expect(existsSync(`${databasePath}-wal`)).toBe(false)
  })

  it('by force, in the middle of saves, loses no save that was acknowledged', async () => {
    const databasePath = place.file('polewright.db')
    const server = await startServer({ databasePath })
    const person = await register(server.origin)
    const acknowledged: string[] = []
    const save = async (title: string) => {
      const answer = await person.post('/api/scenarios', { title, document: slewDocument }).catch(() => undefined)
      if (answer?.status === 201) acknowledged.push(title)
      return answer !== undefined
    }
    const saving = Promise.all([0, 1, 2].map(async (caller) => {
      for (let n = 0; await save(`${caller}-${n}`); n += 1);
    }))
    await expect.poll(() => acknowledged.length, { timeout: 20_000 }).toBeGreaterThan(60)
    await server.stop('SIGKILL')
    await saving

    const sqlite = new Database(databasePath)
    expect(sqlite.pragma('integrity_check', { simple: true })).toBe('ok')
    const titles = new Set(sqlite.prepare('SELECT title FROM scenarios').pluck().all())
    sqlite.close()
    expect(acknowledged.filter(title => !titles.has(title))).toEqual([])

    const again = await startServer({ databasePath })
    const { body } = await new Client(again.origin).send<ScenarioPage>('GET', '/api/scenarios', undefined, { cookie: person.cookie })
    expect(body.total).toBeGreaterThanOrEqual(acknowledged.length)
    await again.stop()
  })
})

describe('what is stored', () => {
  it('hashes passwords with scrypt at the cost that was decided, and never holds them as typed', async () => {
    const databasePath = place.file('polewright.db')
    const server = await startServer({ databasePath })
    const person = await register(server.origin)
    await server.stop()
    const sqlite = new Database(databasePath)
    const hash = sqlite.prepare('SELECT password_hash FROM users').pluck().get()
    sqlite.close()
    expect(hash).toMatch(/^\$scrypt\$n=16384,r=8,p=5\$/)
    expect(readFileSync(databasePath).includes(person.password)).toBe(false)
  })
})
