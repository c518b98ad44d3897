import Database from 'better-sqlite3'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Comment } from '#shared/schemas/comment'
import type { ShareLink, SharedScenario } from '#shared/schemas/link'
import type { Scenario } from '#shared/schemas/scenario'
import { slewDocument } from '../fixtures/document'
import { Client, register } from '../helpers/client'
import { readEvents } from '../helpers/events'
import { startServer, type RunningServer } from '../helpers/server'

let server: RunningServer
let owner: Awaited<ReturnType<typeof register>>
let guest: Client
let scenario: Scenario

beforeAll(async () => {
  server = await startServer()
  owner = await register(server.origin)
  guest = new Client(server.origin)
  scenario = (await owner.post<Scenario>('/api/scenarios', { title: 'Slew axis', document: { ...slewDocument, notes: 'for the team' } })).body
})
afterAll(() => server.stop())

/** In the database itself, so that no test waits for a clock. */
function bringForwardExpiry(linkId: string) {
  const sqlite = new Database(server.databasePath)
  const { changes } = sqlite.prepare('UPDATE links SET expires_at = ? WHERE id = ?').run(Date.now() - 1, linkId)
  sqlite.close()
  expect(changes).toBe(1)
}

const share = async (body: object) => (await owner.post<ShareLink>(`/api/scenarios/${scenario.id}/links`, body)).body

describe('a share link', () => {
  it('shows what a visitor may see and no more', async () => {
    const link = await share({ permission: 'view' })
    expect(link.token).toMatch(/^[\w-]{21}$/)
    expect(link.url).toBe(`${server.origin}/s/${link.token}`)
    const seen = await guest.get<SharedScenario>(`/api/shared/${link.token}`)
    expect(Object.keys(seen.body).sort())
      .toEqual(['axis', 'document', 'machine', 'ownerName', 'permission', 'title', 'updatedAt', 'version'])
    expect(seen.body).toMatchObject({ title: 'Slew axis', ownerName: 'Runa Holt', permission: 'view' })
    expect(seen.headers.get('referrer-policy')).toBe('no-referrer')
    expect(seen.headers.get('x-robots-tag')).toContain('noindex')
    expect(seen.headers.get('cache-control')).toBe('no-store')
  })

  it('is revoked singly and at once', async () => {
    const [first, second] = [await share({ permission: 'view' }), await share({ permission: 'view' })]
    expect((await owner.delete(`/api/scenarios/${scenario.id}/links/${first.id}`)).status).toBe(204)
    expect((await guest.get(`/api/shared/${first.token}`)).status).toBe(404)
    expect((await guest.get(`/api/shared/${first.token}/comments`)).status).toBe(404)
    expect((await guest.get(`/api/shared/${second.token}`)).status).toBe(200)
    const listed = (await owner.get<{ links: ShareLink[] }>(`/api/scenarios/${scenario.id}/links`)).body.links.map(link => link.id)
    expect(listed).toContain(second.id)
    expect(listed).not.toContain(first.id)
  })

  it('expires', async () => {
    const link = await share({ permission: 'view', expiresAt: new Date(Date.now() + 86_400_000).toISOString() })
    expect((await guest.get(`/api/shared/${link.token}`)).status).toBe(200)
    bringForwardExpiry(link.id)
    expect((await guest.get(`/api/shared/${link.token}`)).status).toBe(404)
    const past = await owner.post(`/api/scenarios/${scenario.id}/links`, { permission: 'view', expiresAt: '2020-01-01T00:00:00Z' })
    expect(past.status).toBe(400)
  })

  it('does not work by the id of the scenario, nor once that is deleted', async () => {
    expect((await guest.get(`/api/shared/${scenario.id}`)).status).toBe(404)
    const other = (await owner.post<Scenario>('/api/scenarios', { title: 'Gone', document: slewDocument })).body
    const link = (await owner.post<ShareLink>(`/api/scenarios/${other.id}/links`, { permission: 'view' })).body
    await owner.delete(`/api/scenarios/${other.id}`)
    expect((await guest.get(`/api/shared/${link.token}`)).status).toBe(404)
  })
})

describe('comments', () => {
  it('come from guests with a name where the link allows them, and stay text', async () => {
    const link = await share({ permission: 'comment' })
    const address = `/api/shared/${link.token}/comments`
    expect((await guest.post(address, { body: 'no name' })).status).toBe(400)
    const body = '<img src=x onerror=alert(1)> why here?'
    const made = await guest.post<Comment>(address, { name: 'Pell', body, anchor: { kind: 'plane', re: -1, im: 2 } })
    expect(made.status).toBe(201)
    expect(made.body).toMatchObject({ authorName: 'Pell', guest: true, body, anchor: { kind: 'plane', re: -1, im: 2 }, resolved: false })
    const reply = await owner.post<Comment>(`/api/scenarios/${scenario.id}/comments`, { body: 'Payload', parentId: made.body.id })
    expect(reply.body).toMatchObject({ authorName: 'Runa Holt', guest: false, parentId: made.body.id })
    const { comments } = (await guest.get<{ comments: Comment[] }>(address)).body
    expect(comments.map(comment => comment.body)).toEqual([body, 'Payload'])
    expect(JSON.stringify(comments)).not.toContain('@')
    const resolved = await owner.patch<Comment>(`/api/scenarios/${scenario.id}/comments/${made.body.id}`, { resolved: true })
    expect(resolved.body.resolved).toBe(true)
  })

  it('are refused on a link to view', async () => {
    const link = await share({ permission: 'view' })
    expect((await guest.post(`/api/shared/${link.token}/comments`, { name: 'Pell', body: 'Hm' })).status).toBe(403)
  })

  it.each([
    ['an unknown anchor', { body: 'x', anchor: { kind: 'moon' } }],
    ['an anchor with too much', { body: 'x', anchor: { kind: 'response', time: 1, re: 2 } }],
    ['an empty text', { body: '   ' }],
    ['a text beyond the limit', { body: 'x'.repeat(4001) }],
    ['a reply to nothing', { body: 'x', parentId: 'nothing' }],
  ])('refuse %s', async (_what, body) => {
    expect((await owner.post(`/api/scenarios/${scenario.id}/comments`, body)).status).toBe(400)
  })

  it('do not reply across scenarios', async () => {
    const other = (await owner.post<Scenario>('/api/scenarios', { title: 'Other', document: slewDocument })).body
    const there = (await owner.post<Comment>(`/api/scenarios/${other.id}/comments`, { body: 'There' })).body
    expect((await owner.post(`/api/scenarios/${scenario.id}/comments`, { body: 'Here', parentId: there.id })).status).toBe(400)
    expect((await owner.patch(`/api/scenarios/${scenario.id}/comments/${there.id}`, { resolved: true })).status).toBe(404)
  })
})

describe('live events', () => {
  it('tell the owner of a guest\'s comment and visitors of a new version', async () => {
    const link = await share({ permission: 'comment' })
    const watched = await readEvents(`${server.origin}/api/scenarios/${scenario.id}/events`, owner.cookie)
    const visiting = await readEvents(`${server.origin}/api/shared/${link.token}/events`)
    await guest.post(`/api/shared/${link.token}/comments`, { name: 'Pell', body: 'Live?' })
    expect(await watched.next('comment')).toMatchObject({ body: 'Live?', authorName: 'Pell' })
    const { version } = (await owner.get<Scenario>(`/api/scenarios/${scenario.id}`)).body
    await owner.patch(`/api/scenarios/${scenario.id}`, { version, title: 'Slew axis, heavier' })
    expect(await visiting.next('scenario')).toMatchObject({ version: version + 1 })
    await owner.delete(`/api/scenarios/${scenario.id}/links/${link.id}`)
    expect(await visiting.ended()).toBe(true)
    watched.close()
  })
})
