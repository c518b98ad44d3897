import { describe, expect, it } from 'vitest'
import { BenchPage } from '../helpers/bench-page'
import { phone } from '../helpers/browser'
import { commentsOf, focused, saveState, shareLink, writeComment } from '../helpers/people-pages'
import { peopleStage } from '../helpers/people-stage'

const { arrive, owner } = peopleStage()

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
