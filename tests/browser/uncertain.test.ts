import { describe, expect, it } from 'vitest'
import { BenchPage } from '../helpers/bench-page'
import { stage } from '../helpers/stage'

const { visit } = stage()

describe('figures that rounding may move', () => {
  it('are marked and said in words, and only those', async () => {
    const someone = await visit()
    const bench = await new BenchPage(someone.page).open('/')
    expect(await someone.page.locator('[data-test="uncertainty-sentence"]').count()).toBe(0)

    // s³ + 3 s² + 2 s + k crosses the axis at k = 6: the last digit decides.
    await bench.typeCoefficients({ numerator: '1', denominator: '1 3 2 0' })
    await bench.chooseController('gain')
    await bench.settled()
    await bench.typeGain(6)
    await someone.page.locator('[data-test="on-the-border"]').waitFor()
    expect(await bench.says('uncertainty-sentence')).toContain('rounding decides whether the loop is stable')
    const marked = async (test: string) => (await someone.page.locator(`[data-test="${test}"]`).innerText()).includes('uncertain')
    expect([await marked('overshoot'), await marked('settling-time'), await marked('gain-margin')]).toEqual([true, true, false])

    await bench.typeGain(5)
    await someone.page.locator('[data-test="uncertainty-sentence"]').waitFor({ state: 'detached' })
    expect(await marked('overshoot')).toBe(false)
    expect(someone.faults()).toEqual([])
    await someone.leave()
  })
})
