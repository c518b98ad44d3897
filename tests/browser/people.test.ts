import { afterEach, describe, expect, it } from 'vitest'
import { slewDocument } from '../fixtures/document'
import { BenchPage } from '../helpers/bench-page'
import { phone, type Visitor } from '../helpers/browser'
import { commentsOf, focused, nameScenario, newAccount, register, registerHere, saveState, shareLink, signIn, signInHere, signOut, writeComment } from '../helpers/people-pages'
import { stage } from '../helpers/stage'

const { visit, origin } = stage()

let visitors: Visitor[] = []

afterEach(async () => {
  const all = visitors
  visitors = []
  for (const one of all) await one.leave()
})

async function arrive(options?: Parameters<typeof visit>[0]): Promise<Visitor> {
  const someone = await visit(options)
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

describe('a person with an account, signed out', () => {
  it('drags, signs in to save, by way of the register page too, and finds the scenario', async () => {
    const account = newAccount('Runa Holt')
    const { page } = await arrive()
    await register(page, account)
    await signOut(page)
    const bench = await new BenchPage(page).open('/')
    await bench.dragPointBy(-50, -70)
    await bench.placePoint(0.62, 1.1)
    const gain = await bench.awaitFigure('gain', value => expect(value).toBeGreaterThan(0))

    const dialog = await nameScenario(page, { title: 'Slew with spreader' })
    await dialog.getByRole('button', { name: 'Sign in and save' }).click()
    await page.waitForURL('**/sign-in')
    await page.getByText('“Slew with spreader” is kept').waitFor()
    await page.getByRole('link', { name: 'Create one' }).click()
    await page.waitForURL('**/register')
    await page.getByText('“Slew with spreader” is kept').waitFor()
    await page.getByRole('main').getByRole('link', { name: 'Sign in' }).click()
    await page.waitForURL('**/sign-in')
    await signInHere(page, account)
    await page.waitForURL('**/scenarios/*')
    await page.goto('/scenarios')
    await page.getByRole('link', { name: 'Slew with spreader' }).click()
    await bench.ready()
    await bench.awaitFigure('gain', value => expect(value).toBe(gain))
  })
})

describe('a dialog', () => {
  it('begins at its first field or its main action, leads to what is wrong, and comes to closing last', async () => {
    const { page } = await owner()
    await page.goto('/')
    await new BenchPage(page).ready()
    await page.getByRole('button', { name: 'Save', exact: true }).click()
    await expect.poll(() => focused(page)).toBe('Title')
    await page.keyboard.press('Delete')
    await page.keyboard.press('Tab')
    await page.keyboard.press('Enter')
    await page.getByText('give the scenario a title').waitFor()
    await expect.poll(() => focused(page)).toBe('Title')
    for (const stop of ['Machine', 'Axis', 'Save']) {
      await page.keyboard.press('Tab')
      expect(await focused(page)).toBe(stop)
    }
    await page.keyboard.press('Tab')
    expect(await page.evaluate(() => document.activeElement?.getAttribute('aria-label'))).toBe('Close')
    await page.keyboard.press('Enter')

    await page.goto('/scenarios')
    await page.getByRole('button', { name: /^Rename/ }).click()
    await expect.poll(() => focused(page)).toBe('Title')
    await page.keyboard.type('Heavier still')
    await page.keyboard.press('Enter')
    await page.getByRole('link', { name: 'Heavier still' }).click()
    await new BenchPage(page).ready()
    await page.getByRole('button', { name: 'Share', exact: true }).click()
    await expect.poll(() => focused(page)).toBe('look, try a what-if and comment')
  })
})

describe('a message that goes by itself', () => {
  it('stays for as long as it is pointed at or holds the focus', async () => {
    const { page } = await arrive()
    await register(page, newAccount('Runa Holt'))
    await page.request.post('/api/scenarios', { headers: { origin: origin() }, data: { title: 'Heavier hook block', machine: '', axis: '', document: slewDocument } })
    await page.clock.install()
    await page.goto('/scenarios')
    await page.getByRole('button', { name: 'Delete Heavier hook block' }).click()
    const message = page.locator('[data-test="toast"]')
    await message.hover()
    await page.clock.fastForward(30_000)
    expect(await message.count()).toBe(1)
    await message.getByRole('button', { name: 'Undo' }).focus()
    await page.mouse.move(0, 0)
    await page.clock.fastForward(30_000)
    expect(await message.count()).toBe(1)
    await page.getByRole('searchbox').focus()
    await page.clock.fastForward(11_000)
    expect(await message.count()).toBe(1)
    await page.clock.fastForward(1_100)
    await message.waitFor({ state: 'detached' })
  })
})

describe('the title in the bar', () => {
  it('leaves the focus where the person goes, and a long one leaves the row as it is', async () => {
    const { page } = await owner()
    const bar = page.locator('.bench-bar')
    const height = async () => (await bar.boundingBox())!.height
    const before = await height()
    const title = page.locator('[data-test="title"]')
    await title.click()
    const long = 'Slew axis with the heavier hook block and the long boom, brakes released, wind from the side, second visit'
    await page.keyboard.type(long)
    await page.locator('[data-test="zeta"]').click()
    await title.waitFor()
    expect(await page.evaluate(() => document.activeElement?.getAttribute('data-test'))).toBe('zeta')
    expect(await title.getAttribute('title')).toContain(long)
    expect(await height()).toBe(before)
    await title.click()
    await page.keyboard.press('Enter')
    await expect.poll(() => focused(page)).toBe(long)
  })
})

describe('comments', () => {
  it('are told to whoever works elsewhere on the page, not to their author', async () => {
    const runa = await owner()
    const link = await shareLink(runa.page, 'comment')
    const guest = await arrive()
    await new BenchPage(guest.page).open(link)
    await writeComment(guest.page, { body: 'Is this with the trolley out?', name: 'Ilse Brandt' })
    const told = runa.page.locator('[data-test="toast"]')
    await told.getByText('Ilse Brandt commented.').waitFor()
    await told.getByRole('button', { name: 'Show' }).click()
    await expect.poll(() => focused(runa.page)).toContain('Is this with the trolley out?')
    await told.waitFor({ state: 'detached' })

    await commentsOf(runa.page).getByRole('button', { name: 'Reply' }).click()
    const reply = runa.page.getByRole('form', { name: 'Reply' })
    await reply.getByLabel('Reply').fill('It is.')
    await reply.getByRole('button', { name: 'Send the reply' }).click()
    const answered = guest.page.locator('[data-test="toast"]')
    await answered.getByText('Runa Holt replied.').waitFor()
    await answered.getByRole('button', { name: 'Show' }).click()
    await expect.poll(() => focused(guest.page)).toContain('It is.')
    expect(await told.count() + await answered.count()).toBe(0)
  })

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
    await signOut(page)

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
    await signOut(page)
    await page.goto('/scenarios')
    await page.waitForURL('**/sign-in?to=/scenarios')
    await page.goto(`/sign-in?to=${encodeURIComponent('https://example.org/')}`)
    await signInHere(page, account)
    await page.waitForURL(`${origin()}/scenarios`)
    visitors.at(-1)!.expectFailure(404, /\/scenarios\//)
    expect((await page.goto(address))!.status()).toBe(404)
    await page.getByRole('heading', { name: 'There is nothing here' }).waitFor()
  })
})
