import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { DesignSolution } from '#shared/control/types'
import type { Comment } from '#shared/schemas/comment'
import type { SharedScenario } from '#shared/schemas/link'
import type { Scenario, ScenarioPage } from '#shared/schemas/scenario'
import { seed } from '../../scripts/seed.mjs'
import { Client } from '../helpers/client'
import { startServer, type RunningServer } from '../helpers/server'

let server: RunningServer

beforeAll(async () => { server = await startServer({ environment: { NUXT_RATE_LIMITS: 'on' } }) })
afterAll(() => server.stop())

describe('the demo team', () => {
  it('is made once, with a link that works and comments on it', async () => {
    const demo = await seed(server.origin)
    expect(await seed(server.origin)).toEqual(demo)
    const address = `/api/shared/${demo.shareUrl?.split('/s/')[1]}`
    const guest = new Client(server.origin)
    expect((await guest.get<SharedScenario>(address)).body).toMatchObject({ title: 'Slew axis, full container', permission: 'comment' })
    const { comments } = (await guest.get<{ comments: Comment[] }>(`${address}/comments`)).body
    expect(comments.filter(comment => comment.parentId === null)).toHaveLength(3)
    expect(comments.filter(comment => comment.resolved)).toHaveLength(1)
  })

  it('has designs that reach their points and meet their requirements', async () => {
    const person = new Client(server.origin)
    const { email, password } = await seed(server.origin)
    await person.post('/api/auth/sign-in', { email, password })
    const { scenarios } = (await person.get<ScenarioPage>('/api/scenarios')).body
    expect(scenarios[0]?.title).toBe('Slew axis, full container')
    expect(scenarios).toHaveLength(4)
    for (const { id } of scenarios) {
      const { loop, controller, designPoint, requirements } = (await person.get<Scenario>(`/api/scenarios/${id}`)).body.document
      const { body } = await person.post<DesignSolution>('/api/design/solve', { loop, controller, designPoint, requirements })
      expect(body).toMatchObject({ onLocus: true, stable: true, unmet: 0 })
    }
  })
})
