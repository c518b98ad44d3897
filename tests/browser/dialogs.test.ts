import { describe, expect, it } from 'vitest'
import { slewDocument } from '../fixtures/document'
import { BenchPage } from '../helpers/bench-page'
import { focused, newAccount, register } from '../helpers/people-pages'
import { peopleStage } from '../helpers/people-stage'

const { origin, arrive, owner } = peopleStage()

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
