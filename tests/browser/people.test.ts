import type { Browser } from 'playwright-core'
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest'
import { BenchPage } from '../helpers/bench-page'
import { openBrowser, phone, visitor, type Visitor } from '../helpers/browser'
import { commentsOf, nameScenario, newAccount, register, registerHere, saveState, shareLink, signIn, writeComment } from '../helpers/people-pages'
import { startServer, type RunningServer } from '../helpers/server'

let server: RunningServer
let browser: Browser
let visitors: Visitor[] = []

beforeAll(async () => {
  [server, browser] = await Promise.all([startServer(), openBrowser()])
})
afterAll(async () => {
  await browser?.close()
  await server?.stop()
})
afterEach(async () => {
  const all = visitors
  visitors = []
  for (const one of all) await one.leave()
})

async function arrive(options?: Parameters<typeof visitor>[2]): Promise<Visitor> {
  const someone = await visitor(browser, server.origin, options)
  visitors.push(someone)
  return someone
}

/** Somebody with a saved scenario on the bench. */
async function owner(title = 'Heavier hook block') {
  const someone = await arrive()
  await register(someone.page, newAccount('Runa Holt'))
  const bench = await new BenchPage(someone.page).open('/')
  await bench.placePoint(0.55, 0.9)
  await (await nameScenario(someone.page, { title })).getByRole('button', { name: 'Save', exact: true }).click()
  await someone.page.waitForURL('**/scenarios/*')
  await bench.ready()
  return { ...someone, bench }
}

describe('from the first drag to a colleague who answers', () => {
  it('keeps the work through signing up, saves it, shares it, and hears the comment without reloading', async () => {
    const { page } = await arrive()
    const bench = await new BenchPage(page).open('/')
    await bench.dragPointBy(-50, -70)
    await bench.placePoint(0.62, 1.1)
    await bench.awaitFigure('omega-n', value => expect(value).toBeCloseTo(1.1, 12))
    const gain = await bench.awaitFigure('gain', value => expect(value).toBeGreaterThan(0))
    const figures = { gain, overshoot: await bench.reading('overshoot'), settling: await bench.reading('settling-time') }

    const dialog = await nameScenario(page, { title: 'Slew with spreader', machine: 'Quay crane 4', axis: 'Slew axis' })
    await dialog.getByRole('button', { name: 'Create an account and save' }).click()
    await page.getByText('“Slew with spreader” is kept').waitFor()
    await registerHere(page, newAccount('Runa Holt'))
    await page.waitForURL('**/scenarios/*')
    await bench.ready()
    await saveState(page, /^saved$/)
    expect(await page.title()).toContain('Slew with spreader')
    const link = await shareLink(page, 'comment')

    const colleague = await arrive()
    const seen = await new BenchPage(colleague.page).open(link)
    expect(await colleague.page.title()).toContain('Slew with spreader')
    await seen.awaitFigure('gain', value => expect(value).toBe(figures.gain))
    await colleague.page.locator('[data-test="share-banner"]').getByText('Runa Holt').waitFor()
    await seen.dragPointBy(-40, -60)
    await seen.awaitFigure('gain', value => expect(value).not.toBe(figures.gain))
    await colleague.page.getByText('Your what-if stays in this page.').waitFor()

    const text = '<b>Could</b> we stand here & now?'
    await writeComment(colleague.page, { body: text, name: 'Ilse Brandt', about: 'the design point where it stands' })
    await expect.poll(() => commentsOf(page).count()).toBe(1)
    expect(await commentsOf(page).first().innerText()).toContain(text)
    expect(await commentsOf(page).first().innerText()).toContain('Ilse Brandt')
    expect(await commentsOf(page).first().locator('b', { hasText: 'Could' }).count()).toBe(0)

    await page.reload()
    await bench.ready()
    await bench.awaitFigure('gain', value => expect(value).toBe(figures.gain))
    await bench.awaitFigure('overshoot', value => expect(value).toBe(figures.overshoot))
    expect(await bench.reading('settling-time')).toBe(figures.settling)
    await colleague.page.locator('[data-test="back-to-shared"]').click()
    await seen.awaitFigure('gain', value => expect(value).toBe(figures.gain))
  })
})

describe('comments', () => {
  it('are pinned, answered, resolved and folded, and a flag and its comment lead to each other', async () => {
    const runa = await owner()
    const link = await shareLink(runa.page, 'comment')
    const guest = await arrive()
    const seen = await new BenchPage(guest.page).open(link)
    await guest.page.locator('[data-test="pin-overshoot"]').click()
    await writeComment(guest.page, { body: 'Is this with the trolley out?', name: 'Ilse Brandt' })
    await expect.poll(() => commentsOf(runa.page).count()).toBe(1)
    expect(await commentsOf(runa.page).first().innerText()).toMatch(/on overshoot/i)
    await runa.page.locator('[data-test="row-overshoot"] [data-test="pin-1"]').click()
    await expect.poll(() => runa.page.evaluate(() => document.activeElement?.textContent ?? '')).toContain('Is this with the trolley out?')

    await writeComment(guest.page, { body: 'And here?', about: 'the design point where it stands' })
    await guest.page.locator('[data-test="response"]').click({ position: { x: 300, y: 60 } })
    await writeComment(guest.page, { body: 'It passes here first.' })
    await runa.page.getByRole('region', { name: 'Response' }).locator('[data-test="pin-3"]').click()
    await expect.poll(() => runa.page.evaluate(() => document.activeElement?.textContent ?? '')).toContain('It passes here first.')

    const flag = runa.page.getByRole('button', { name: /^Comment 2 at/ })
    await flag.click()
    await expect.poll(() => runa.page.evaluate(() => document.activeElement?.textContent ?? '')).toContain('And here?')

    await commentsOf(runa.page).nth(1).getByRole('button', { name: 'Reply' }).click()
    const reply = runa.page.getByRole('form', { name: 'Reply' })
    await reply.getByLabel('Reply').fill('Only with the hook block.')
    await reply.getByRole('button', { name: 'Send the reply' }).click()
    await guest.page.getByText('Only with the hook block.').waitFor()

    await commentsOf(runa.page).nth(1).getByRole('button', { name: 'Resolve' }).click()
    await guest.page.getByText('1 resolved').waitFor()
    await guest.page.getByRole('button', { name: /^Comment 2 at/ }).waitFor({ state: 'hidden' })
    expect(await guest.page.getByRole('button', { name: 'Resolve' }).count()).toBe(0)
    expect(await seen.gain()).toBe(await runa.bench.gain())
  })

  it('are not offered by a link to view', async () => {
    const runa = await owner()
    const link = await shareLink(runa.page, 'view')
    const guest = await arrive(phone)
    await new BenchPage(guest.page).open(link)
    await guest.page.locator('[data-test="comments"]').waitFor()
    expect(await guest.page.getByRole('form', { name: 'New comment' }).count()).toBe(0)
    expect(await guest.page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(390)
  })
})

describe('a share link', () => {
  it('shows the owner’s changes as they are saved, and nothing any more once it is revoked', async () => {
    const runa = await owner()
    const link = await shareLink(runa.page, 'view')
    const guest = await arrive()
    const seen = await new BenchPage(guest.page).open(link)
    await runa.bench.placePoint(0.7, 1.05)
    await saveState(runa.page, /^saved$/)
    await seen.awaitFigure('omega-n', value => expect(value).toBeCloseTo(1.05, 12))

    guest.expectFailure(404, /\/(api\/shared|s)\//)
    await runa.page.getByRole('button', { name: 'Share', exact: true }).click()
    const dialog = runa.page.getByRole('dialog')
    await dialog.getByRole('button', { name: 'Revoke', exact: true }).click()
    await dialog.getByRole('button', { name: 'Revoke it' }).click()
    await dialog.getByText('None yet.').waitFor()
    await guest.page.getByRole('heading', { name: 'This link does not work any more' }).waitFor()
    expect((await guest.page.goto(link))!.status()).toBe(404)
    await guest.page.getByRole('heading', { name: 'This link does not work any more' }).waitFor()
  })
})

describe('the account forms', () => {
  it('name each field that is wrong, keep what was typed, and say the same for an unknown account as for a wrong password', async () => {
    const someone = await arrive()
    const { page } = someone
    const account = newAccount('Runa Holt')
    await page.goto('/register')
    await page.getByLabel('Your name').fill('Runa Holt')
    await page.getByLabel('E-mail').fill('runa at home')
    await page.getByLabel('Password').fill('short')
    await page.getByRole('button', { name: 'Create the account' }).click()
    await page.getByText('this is not an e-mail address').waitFor()
    await page.getByText('a password has at least 8 characters').waitFor()
    expect(await page.getByLabel('E-mail').inputValue()).toBe('runa at home')
    expect(await page.evaluate(() => document.activeElement?.getAttribute('name'))).toBe('email')

    await registerHere(page, account)
    await page.waitForURL('**/scenarios')
    await page.getByText('Your scenarios will stand here').waitFor()
    await page.locator('[data-test="account"]').click()
    await page.getByRole('button', { name: 'Sign out' }).click()
    await page.waitForURL('**/sign-in')

    someone.expectFailure(401, /\/api\/auth\/sign-in/)
    someone.expectFailure(400, /\/api\/auth\/register/)
    await signIn(page, { ...account, password: 'not the right one' })
    await page.getByRole('alert').getByText('do not belong together').waitFor()
    expect(await page.getByLabel('E-mail').inputValue()).toBe(account.email)
    await signIn(page, { ...newAccount('Nobody'), password: 'not the right one' })
    await page.getByRole('alert').getByText('do not belong together').waitFor()
    await page.goto('/register')
    await registerHere(page, account)
    await page.getByText('there is an account with this address already').waitFor()
    await signIn(page, account)
    await page.waitForURL('**/scenarios')
  })

  it('send a stranger from a scenario to signing in and back', async () => {
    const runa = await owner()
    const address = new URL(runa.page.url()).pathname
    const account = newAccount('Runa Holt')
    const { page } = await arrive()
    await register(page, account)
    await page.locator('[data-test="account"]').click()
    await page.getByRole('button', { name: 'Sign out' }).click()
    await page.waitForURL('**/sign-in')
    await page.goto('/scenarios')
    await page.waitForURL('**/sign-in?to=/scenarios')
    await page.goto(`/sign-in?to=${encodeURIComponent('https://example.org/')}`)
    await page.getByLabel('E-mail').fill(account.email)
    await page.getByLabel('Password').fill(account.password)
    await page.getByRole('button', { name: 'Sign in' }).click()
    await page.waitForURL(`${server.origin}/scenarios`)
    visitors.at(-1)!.expectFailure(404, /\/scenarios\//)
    expect((await page.goto(address))!.status()).toBe(404)
    await page.getByRole('heading', { name: 'There is nothing here' }).waitFor()
  })
})
