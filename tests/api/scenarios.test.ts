import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Scenario, ScenarioPage } from '#shared/schemas/scenario'
import { slewDocument } from '../fixtures/document'
import { Client, register } from '../helpers/client'
import { startServer, type RunningServer } from '../helpers/server'

let server: RunningServer
let person: Awaited<ReturnType<typeof register>>
let stranger: Awaited<ReturnType<typeof register>>

beforeAll(async () => {
  server = await startServer()
  person = await register(server.origin)
  stranger = await register(server.origin, 'Odo Falk')
})
afterAll(() => server.stop())

const create = async (title: string, names = {}) =>
  (await person.post<Scenario>('/api/scenarios', { title, document: slewDocument, ...names })).body

describe('a scenario', () => {
  it('is saved and read back as it was', async () => {
    const made = await person.post<Scenario>('/api/scenarios', { title: ' Heavier hook ', machine: 'Quay crane 2', axis: 'slew', document: slewDocument })
    expect(made.status).toBe(201)
    expect(made.body).toMatchObject({ title: 'Heavier hook', machine: 'Quay crane 2', axis: 'slew', version: 1, ownerName: 'Runa Holt', status: 'draft' })
    const read = await person.get<Scenario>(`/api/scenarios/${made.body.id}`)
    expect(read.body).toEqual(made.body)
    expect(read.body.document).toEqual(slewDocument)
    expect(read.headers.get('cache-control')).toBe('no-store')
    expect(JSON.stringify(read.body)).not.toContain('@')
  })

  it('is refused when it is not whole, with every fault named', async () => {
    const answer = await person.post('/api/scenarios', { title: '', document: { ...slewDocument, designPoint: { re: 'x', im: 1 }, extra: 1 } })
    expect(answer.status).toBe(400)
    const { issues } = (answer.body as { data: { issues: { path: string }[] } }).data
    expect(issues.map(issue => issue.path).sort()).toEqual(['document.designPoint.re', 'document.extra', 'title'])
  })

  it('changes only for who read the newest version; the other gets it to compare', async () => {
    const { id } = await create('Contended')
    const first = await person.patch<Scenario>(`/api/scenarios/${id}`, { version: 1, title: 'First' })
    expect(first.body).toMatchObject({ version: 2, title: 'First' })
    const second = await person.patch(`/api/scenarios/${id}`, { version: 1, title: 'Second' })
    expect(second.status).toBe(409)
    expect(second.body).toMatchObject({ data: { current: { version: 2, title: 'First', document: slewDocument } } })
    expect((await person.get<Scenario>(`/api/scenarios/${id}`)).body.title).toBe('First')
    expect((await person.patch(`/api/scenarios/${id}`, { title: 'No version' })).status).toBe(400)
  })

  it('is duplicated, deleted, and brought back', async () => {
    const { id } = await create('Original', { machine: 'Winch 4' })
    const copy = await person.post<Scenario>(`/api/scenarios/${id}/duplicate`)
    expect(copy.status).toBe(201)
    expect(copy.body).toMatchObject({ title: 'Original (copy)', machine: 'Winch 4', version: 1 })
    expect(copy.body.id).not.toBe(id)
    expect((await person.delete(`/api/scenarios/${id}`)).status).toBe(204)
    expect((await person.get(`/api/scenarios/${id}`)).status).toBe(404)
    expect((await person.delete(`/api/scenarios/${id}`)).status).toBe(404)
    expect((await person.post<Scenario>(`/api/scenarios/${id}/restore`)).body).toMatchObject({ id, title: 'Original' })
    expect((await person.get(`/api/scenarios/${id}`)).status).toBe(200)
  })
})

describe('the table of scenarios', () => {
  it('searches, sorts and pages', async () => {
    const owner = await register(server.origin)
    for (const [title, machine] of [['b gantry', 'Mill 1'], ['A gantry', 'Mill 2'], ['100 % payload', 'Mill 1'], ['c_1', 'Lathe']]) {
      await owner.post('/api/scenarios', { title, machine, document: slewDocument })
    }
    const titles = async (query: string) => (await owner.get<ScenarioPage>(`/api/scenarios?${query}`)).body.scenarios.map(row => row.title)
    expect(await titles('sort=title')).toEqual(['100 % payload', 'A gantry', 'b gantry', 'c_1'])
    expect(await titles('sort=-title&pageSize=2&page=2')).toEqual(['A gantry', '100 % payload'])
    expect(await titles('search=gantry mill&sort=title')).toEqual(['A gantry', 'b gantry'])
    expect(await titles('search=%25')).toEqual(['100 % payload'])
    expect(await titles('search=c_1')).toEqual(['c_1'])
    expect(await titles('search=zz')).toEqual([])
    expect(await titles('machine=Mill 1&sort=createdAt')).toEqual(['b gantry', '100 % payload'])
    expect((await owner.get<ScenarioPage>('/api/scenarios')).body).toMatchObject({ page: 1, pageSize: 20, total: 4 })
  })

  it('refuses a query it does not know', async () => {
    expect((await person.get('/api/scenarios?sort=password')).status).toBe(400)
    expect((await person.get('/api/scenarios?page=0')).status).toBe(400)
    expect((await person.get('/api/scenarios?owner=x')).status).toBe(400)
  })
})

describe('what belongs to others', () => {
  it('is not found on any route, and asks guests to sign in', async () => {
    const { id } = await create('Private')
    const routes: [string, string, unknown?][] = [
      ['GET', ''], ['PATCH', '', { version: 1, title: 'Mine' }], ['DELETE', ''], ['POST', '/restore', {}], ['POST', '/duplicate', {}],
      ['GET', '/links'], ['POST', '/links', { permission: 'view' }], ['DELETE', '/links/abc'],
      ['GET', '/comments'], ['POST', '/comments', { body: 'Hello' }], ['PATCH', '/comments/abc', { resolved: true }], ['GET', '/events'],
    ]
    for (const [method, path, body] of routes) {
      const address = `/api/scenarios/${id}${path}`
      expect([method, path, (await stranger.send(method, address, body)).status]).toEqual([method, path, 404])
      expect([method, path, (await new Client(server.origin).send(method, address, body)).status]).toEqual([method, path, 401])
    }
    expect((await person.get<Scenario>(`/api/scenarios/${id}`)).body).toMatchObject({ title: 'Private', version: 1 })
    expect((await stranger.get<ScenarioPage>('/api/scenarios')).body.total).toBe(0)
  })
})
