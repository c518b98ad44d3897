import { describe, expect, it } from 'vitest'
import type { ShareLink } from '#shared/schemas/link'
import type { Scenario } from '#shared/schemas/scenario'
import { slewDocument } from '../fixtures/document'
import { newAccount, register } from '../helpers/people-pages'
import { stage } from '../helpers/stage'

const { visit, origin } = stage()

const run = 'window.ran=1'

/** What a person might write to have it run in a colleague's browser, short enough for every field. */
const texts = [
  `<script>${run}</script>`,
  `<script><script>${run}</script>`,
  `</script><script>${run}</script><img src=x onerror=${run}>`,
  `"><script><script>${run}</script>`,
  `<style><meta http-equiv=refresh content=0;url=/gone>`,
  `<style><style><meta http-equiv=refresh content=0;url=/gone>`,
  `{{constructor.constructor('${run}')()}}`,
  `</title><svg/onload=${run}>`,
  `\\u003cscript>${run}`,
]

describe.each(texts)('a person who writes %s', (text) => {
  it('is shown it as text, wherever it comes to stand', async () => {
    const { page, leave, expectFailure } = await visit()
    await register(page, { ...newAccount('Runa Holt'), name: text.slice(0, 60) })
    const post = async <Answer>(path: string, data: object) => (await page.request.post(path, { data, headers: { origin: origin() } })).json() as Promise<Answer>
    const short = text.slice(0, 80)
    const scenario = await post<Scenario>('/api/scenarios', {
      title: text,
      machine: short,
      axis: short,
      document: {
        ...slewDocument,
        notes: text,
        loop: { plant: { form: 'expression', expression: 'k/(s*(T*s+1))', parameters: { k: { value: 1, unit: text.slice(0, 32) }, T: { value: 1 } } } },
      },
    })
    const link = await post<ShareLink>(`/api/scenarios/${scenario.id}/links`, { permission: 'comment' })
    await post(`/api/shared/${link.token}/comments`, { body: text, name: short })

    const guest = await visit()
    // No such text is a unit: the server refuses it, and says so at the parameter.
    for (const expectRefusal of [expectFailure, guest.expectFailure]) expectRefusal(400, /\/api\/(design|loop)\//)
    for (const [someone, path] of [[page, '/scenarios'], [page, `/scenarios/${scenario.id}`], [guest.page, `/s/${link.token}`]] as const) {
      await someone.goto(path)
      if (path !== '/scenarios') await someone.locator('.parameter').getByRole('alert').waitFor()
      expect(new URL(someone.url()).pathname).toBe(path)
      expect(await someone.evaluate(() => (window as { ran?: number }).ran)).toBeUndefined()
      expect(await someone.locator('img[src="x"], svg[onload], meta[http-equiv="refresh"]').count()).toBe(0)
    }
    expect(await guest.page.title()).toContain(text.slice(0, 20))
    await guest.leave()
    await leave()
  })
})
