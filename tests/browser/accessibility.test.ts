import { readFileSync } from 'node:fs'
import { createRequire } from 'node:module'
import type { AxeResults } from 'axe-core'
import type { Page } from 'playwright-core'
import { describe, expect, it } from 'vitest'
import { BenchPage } from '../helpers/bench-page'
import { desktop, phone } from '../helpers/browser'
import { nameScenario, newAccount, register, saveAs, saveState, shareLink, writeComment } from '../helpers/people-pages'
import { stage } from '../helpers/stage'

const { visit } = stage()

// The rules are those of axe-core for WCAG 2.2, levels A and AA.
const axe = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8')
const levels = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa']

/** What axe finds on the page as it stands, one line for each rule broken. */
async function barriers(page: Page): Promise<string[]> {
  await page.evaluate(axe)
  const { violations, passes } = await page.evaluate(async (values): Promise<AxeResults> => {
    const { axe } = window as unknown as { axe: { run: (options: object) => Promise<AxeResults> } }
    return axe.run({ runOnly: { type: 'tag', values } })
  }, levels)
  // A run that checked nothing would find nothing.
  expect(passes.length).toBeGreaterThan(5)
  return violations.map(({ id, impact, nodes }) => `${id} (${impact}): ${nodes.map(node => node.target.join(' ')).join(', ')}`)
}

/** By how much the page is wider than the screen; a phone would widen its own measure, so the screen's is taken. */
const sideways = async (page: Page) => await page.evaluate(() => document.documentElement.scrollWidth) - page.viewportSize()!.width

describe.each([
  { theme: 'light', screen: 'a desk', options: desktop },
  { theme: 'dark', screen: 'a desk', options: desktop },
  { theme: 'light', screen: 'a phone', options: phone },
  { theme: 'dark', screen: 'a phone', options: phone },
] as const)('every page, $theme, on $screen', ({ theme, options }) => {
  it('has no barrier that axe knows and does not scroll sideways', async () => {
    const { page, leave } = await visit({ reducedMotion: 'reduce', ...options, colorScheme: theme })
    const found: Record<string, string[]> = {}
    const look = async (name: string) => {
      found[name] = await barriers(page)
      if (await sideways(page) > 0) found[name].push(`scrolls sideways by ${await sideways(page)} px`)
    }

    const bench = await new BenchPage(page).open('/')
    await look('the bench')
    await page.getByText('Find the best point').click()
    await page.getByRole('button', { name: 'Best in the plane' }).click()
    await page.locator('[data-test="best-go"]').waitFor()
    await look('the bench with a best point found')
    await page.locator('[data-test="tab-frequency"]').click()
    await page.locator('[data-test="frequency-chart"]').focus()
    await page.keyboard.press('End')
    await page.locator('[data-test="frequency-reads"]').first().waitFor()
    await look('the bench with the loop over frequency')
    for (const details of ['steady-state', 'locus-facts', 'cautions', 'actuation']) await page.locator(`[data-test="${details}"] > summary`).click()
    await bench.typeCoefficients({ numerator: '1', denominator: '1 0 0' })
    await bench.chooseController('pid')
    await page.locator('[data-test="gain-choices"]').waitFor()
    await look('the bench with everything unfolded and gains to choose from')
    await bench.open('/')
    await bench.type('zeta', 'brisk')
    await look('the bench with an error beside a field')
    await page.goto('/sign-in')
    await look('sign in')
    await page.getByLabel('E-mail').fill('nobody')
    await page.getByRole('button', { name: 'Sign in' }).click()
    await look('sign in with errors')

    await register(page, newAccount('Runa Holt'))
    await look('an empty list of scenarios')
    await bench.open('/')
    await bench.placePoint(0.55, 0.9)
    const dialog = await nameScenario(page, { title: 'Heavier hook block' })
    await look('the dialog that saves')
    await dialog.getByRole('button', { name: 'Save', exact: true }).click()
    await page.waitForURL('**/scenarios/*')
    await saveState(page, /^saved$/)
    const link = await shareLink(page, 'comment')
    await writeComment(page, { body: 'Is the brake released here?' })
    await page.locator('[data-test="comment"]').waitFor()
    await look('a scenario with a comment')
    await page.getByRole('button', { name: 'Share', exact: true }).click()
    await page.getByText(/Links that work/).waitFor()
    await look('the dialog that shares')
    await page.goto('/scenarios')
    await page.getByText('Heavier hook block').first().waitFor()
    await look('the list of scenarios')

    await bench.open(new URL(link).pathname)
    await look('a shared scenario')

    expect(Object.fromEntries(Object.entries(found).filter(([, lines]) => lines.length > 0))).toEqual({})
    await leave()
  })

  it('keeps the register page and a link that is gone within reach', async () => {
    const someone = await visit({ reducedMotion: 'reduce', ...options, colorScheme: theme })
    await someone.page.goto('/register')
    expect(await barriers(someone.page)).toEqual([])
    someone.expectFailure(404, /./)
    await someone.page.goto('/s/nothing-under-this-name')
    expect(await barriers(someone.page)).toEqual([])
    await someone.leave()
  })
})

describe('the bench with limits broken', () => {
  it('fits every width from a phone to a wall, its tables too', async () => {
    const { page, leave } = await visit()
    await register(page, newAccount('Runa Holt'))
    const bench = await new BenchPage(page).open('/')
    await saveAs(page, 'A title so long that it says what is carried, by which crane, and in what weather, all at once')
    await bench.placePoint(0.2, 2.2)
    await page.locator('[data-test="row-overshoot"]').getByText('not met').waitFor()
    const tooWide: object[] = []
    for (const width of [390, 600, 720, 768, 959, 1024, 1120, 1280, 1440, 2560]) {
      await page.setViewportSize({ width, height: 900 })
      const rooms = await page.evaluate(() => [document.documentElement, ...document.querySelectorAll('.zone-readings, .roots, .facts, .loop-sheet, header')]
        .filter(room => room.scrollWidth > room.clientWidth + 1).map(room => room.className || room.tagName))
      if (rooms.length > 0) tooWide.push({ width, rooms })
    }
    expect(tooWide).toEqual([])
    await leave()
  })
})
