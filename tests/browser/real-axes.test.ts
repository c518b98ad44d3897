import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { BenchPage } from '../helpers/bench-page'
import type { Visitor } from '../helpers/browser'
import { stage } from '../helpers/stage'

const { visit } = stage()

let someone: Visitor
let bench: BenchPage
const at = (name: string) => someone.page.locator(`[data-test="${name}"]`)
const isOpen = () => at('actuation').evaluate(details => (details as HTMLDetailsElement).open)

/** 1/(s(s + 1)) with the design point on its locus at k = 1/(4 · 0.36). */
beforeEach(async () => {
  someone = await visit()
  bench = await new BenchPage(someone.page).open('/')
  await bench.typeCoefficients({ numerator: '1', denominator: '1 1 0' })
  await bench.placePoint(0.6, 1 / 1.2)
  await bench.awaitFigure('gain', value => expect(value).toBeCloseTo(1 / 1.44, 9))
  await at('actuation').locator('summary').click()
})
afterEach(() => someone.leave())

describe('a dead time', () => {
  it('moves gain, margin, roots and diagram, and emptying it takes it out', async () => {
    const margin = await bench.reading('phase-margin')
    await bench.type('dead-time', 0.1)
    await bench.awaitFigure('phase-margin', value => expect(value).toBeLessThan(margin - 2))
    // |s (s + 1)| e^(sigma T) at s = -0.5 + 0.667j: the magnitude condition.
    await bench.awaitFigure('gain', value => expect(value).toBeCloseTo(Math.exp(-0.05) / 1.44, 9))
    await expect.poll(() => at('roots-note').innerText()).toContain('infinitely many roots')
    expect(await at('block-diagram').getAttribute('aria-label')).toContain('a dead time of 100\u00A0ms')
    expect(await at('actuation-summary').innerText()).toBe('dead time 100\u00A0ms')
    await at('locus-facts').locator('summary').click()
    expect(await at('locus-dead-time').innerText()).toContain('odd multiples of π/T = 31.42 rad/s')

    await bench.type('dead-time', '')
    await bench.awaitFigure('phase-margin', value => expect(value).toBeCloseTo(margin, 9))
    await at('roots-note').waitFor({ state: 'detached' })
    expect([await at('actuation-summary').count(), await isOpen()]).toEqual([0, true])
  })

  it('below 0 is refused at the field', async () => {
    await bench.type('dead-time', -1)
    const field = someone.page.locator('.number-field', { has: at('dead-time') })
    expect(await field.getByRole('alert').innerText()).toBe('0 or greater')
    expect(await at('dead-time').getAttribute('aria-invalid')).toBe('true')
    await bench.type('dead-time', 0)
    await field.getByRole('alert').waitFor({ state: 'detached' })
  })
})

describe('an actuator limit', () => {
  it('is what the effort keeps to, and says what the controller does not know', async () => {
    await bench.awaitFigure('peak-effort', value => expect(value).toBeCloseTo(1 / 1.44, 6))
    expect(await at('limit-hint').count()).toBe(0)
    await bench.type('actuator-limit', 0.5)
    await bench.awaitFigure('peak-effort', value => expect(value).toBe(0.5))
    expect(await at('limit-hint').innerText()).toContain('no anti-windup')
    expect(await at('block-diagram').getAttribute('aria-label')).toContain('a limit of ±0.5')
  })
})

describe('a sampled controller', () => {
  it('with a computing delay loses margin by each, and each is one step to undo', async () => {
    const margins = [await bench.reading('phase-margin')]
    await bench.type('sample-period', 0.1)
    margins.push(await bench.awaitFigure('phase-margin', value => expect(value).toBeLessThan(margins[0]! - 0.5)))
    await expect.poll(() => at('roots-note').innerText()).toBe('Roots of the sampled loop, as ln(z)/period.')
    await at('computing-delay').selectOption({ label: 'output one sample later' })
    await bench.awaitFigure('phase-margin', value => expect(value).toBeLessThan(margins[1]! - 2))

    await bench.press('Control+z')
    await bench.awaitFigure('phase-margin', value => expect(value).toBe(margins[1]))
    expect(await at('computing-delay').inputValue()).toBe('none')
    await bench.press('Control+z')
    await bench.awaitFigure('phase-margin', value => expect(value).toBe(margins[0]))
    expect(await at('computing-delay').count()).toBe(0)
  })

  it('takes its computing delay along when it goes', async () => {
    const margin = await bench.reading('phase-margin')
    await bench.type('sample-period', 0.1)
    await at('computing-delay').selectOption('one-sample')
    await bench.awaitFigure('phase-margin', value => expect(value).toBeLessThan(margin - 2))
    await bench.type('sample-period', '')
    await bench.awaitFigure('phase-margin', value => expect(value).toBeCloseTo(margin, 9))
    await bench.type('sample-period', 0.1)
    expect(await at('computing-delay').inputValue()).toBe('none')
  })

  it('that the server refuses is told at the field', async () => {
    someone.expectFailure(422, /\/api\/(design|loop)\//)
    await bench.type('dead-time', 1)
    await bench.type('sample-period', 0.001)
    const field = someone.page.locator('.number-field', { has: at('sample-period') })
    await field.getByRole('alert').waitFor()
    expect(await at('sample-period').getAttribute('aria-invalid')).toBe('true')
  })
})
