import { describe, expect, it } from 'vitest'
import { BenchPage } from '../helpers/bench-page'
import { newAccount, register, saveState, saveAs, signIn, signOut } from '../helpers/people-pages'
import { stage } from '../helpers/stage'

const { visit } = stage()

/** Somebody on the page of a scenario of their own. */
async function owner() {
  const account = newAccount('Runa Holt')
  const someone = await visit()
  await register(someone.page, account)
  const bench = await new BenchPage(someone.page).open('/')
  await saveAs(someone.page, 'Heavier hook block')
  return { ...someone, account, bench, notes: someone.page.locator('[data-test="notes"]') }
}

describe('leaving a scenario', () => {
  it('takes nothing of it to the bench that comes next, nor brings anything back', async () => {
    const { page, bench, notes, leave } = await owner()
    const address = page.url()
    await notes.fill('Forty tonnes at full outreach.')
    await notes.blur()
    await saveState(page, /^saved$/)
    await page.getByRole('link', { name: 'Polewright' }).first().click()
    await page.waitForURL(url => url.pathname === '/')
    await bench.ready()
    await expect.poll(() => notes.inputValue(), { timeout: 10_000 }).toBe('')
    await notes.fill('Only a trial.')
    await page.goBack()
    await page.waitForURL(address)
    await bench.ready()
    await expect.poll(() => notes.inputValue(), { timeout: 10_000 }).toBe('Forty tonnes at full outreach.')
    await page.reload()
    await bench.ready()
    await expect.poll(() => notes.inputValue(), { timeout: 10_000 }).toBe('Forty tonnes at full outreach.')
    await leave()
  })

  it('by signing out saves what was typed a moment before', async () => {
    const { page, account, bench, notes, leave } = await owner()
    await notes.fill('Brake released at the test.')
    await signOut(page)
    await signIn(page, account)
    await page.getByRole('link', { name: 'Heavier hook block' }).click()
    await bench.ready()
    await expect.poll(() => notes.inputValue(), { timeout: 10_000 }).toBe('Brake released at the test.')
    await leave()
  })
})
