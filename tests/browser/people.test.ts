import { describe, expect, it } from 'vitest'
import { BenchPage } from '../helpers/bench-page'
import { commentsOf, nameScenario, newAccount, register, registerHere, saveState, shareLink, signIn, signInHere, signOut, writeComment } from '../helpers/people-pages'
import { peopleStage } from '../helpers/people-stage'

const { origin, arrive, owner } = peopleStage()

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
    const { page, expectFailure } = await arrive()
    await register(page, account)
    await signOut(page)
    await page.goto('/scenarios')
    await page.waitForURL('**/sign-in?to=/scenarios')
    await page.goto(`/sign-in?to=${encodeURIComponent('https://example.org/')}`)
    await signInHere(page, account)
    await page.waitForURL(`${origin()}/scenarios`)
    expectFailure(404, /\/scenarios\//)
    expect((await page.goto(address))!.status()).toBe(404)
    await page.getByRole('heading', { name: 'There is nothing here' }).waitFor()
  })
})
