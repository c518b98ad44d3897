import { beforeEach, describe, expect, it } from 'vitest'
import { benchStage } from '../helpers/stage'

const { at, begin } = benchStage()
begin()

const open = (details: string) => at.someone.page.locator(`[data-test="${details}"] > summary`).click()

describe('the sentence on dominance', () => {
  it('names what parts the loop from the estimate, and follows the design', async () => {
    // 1/(s(s + 1)) with a PD: the pair alone, and the zero that the derivative brings.
    await at.bench.typeCoefficients({ numerator: '1', denominator: '1 1 0' })
    await at.bench.chooseController('rate')
    await at.bench.placePoint(0.5, 2)
    await expect.poll(() => at.bench.says('dominance-sentence')).toMatch(/^The pair at -1 ± 1\.73j carries 100 % of the response; estimate and loop agree within/)
    expect(await at.someone.page.locator('[data-test="difference-overshoot"]').count()).toBe(0)

    await at.bench.chooseController('pd')
    // kd = 1, kp = 4: the zero lies at -4; by the formula of the response with a zero the overshoot is 19.1 % in place of 16.3 %.
    await expect.poll(() => at.bench.says('dominance-sentence')).toMatch(/^The zero at -4 adds 2\.8 points of overshoot to the second-order estimate\.$/)
    expect(await at.bench.says('difference-overshoot')).toMatch(/^2\.8 pt low$/)
  })
})

describe('the steady state', () => {
  it('is folded away, and tells type, constants and errors', async () => {
    await at.bench.typeCoefficients({ numerator: '3', denominator: '1 2 0' })
    await at.bench.typeGain(2)
    await at.bench.awaitFigure('gain', value => expect(value).toBeCloseTo(2, 9))
    expect(await at.someone.page.locator('[data-test="velocity-constant"]').isVisible()).toBe(false)
    await open('steady-state')
    // Kv = 2 · 3/2.
    expect(await at.bench.reading('velocity-constant')).toBeCloseTo(3, 12)
    expect(await at.bench.reading('error-ramp')).toBeCloseTo(1 / 3, 12)
    const words = await Promise.all(['system-type', 'position-constant', 'acceleration-constant', 'error-step', 'error-parabola'].map(at.bench.says))
    expect(words).toEqual(['1', 'infinite', '0', '0', 'grows'])
  })
})

describe('several gains for one point', () => {
  it('are chosen between without moving the point, and undone', async () => {
    await at.bench.typeCoefficients({ numerator: '1', denominator: '1 0 0' })
    await at.bench.chooseController('pid')
    await at.bench.type('point-re', -1)
    await at.bench.type('point-im', 1)
    // (s² + 2 s + 2)(s + t) with kp² = 4 ki kd: t = -1 ± sqrt 2, the positive gains first.
    const kp = (t: number) => (value: number) => expect(value).toBeCloseTo(2 + 2 * t, 9)
    const [first, second] = [Math.SQRT2 - 1, -1 - Math.SQRT2]
    await at.bench.awaitFigure('gain', kp(first))
    const group = at.someone.page.getByRole('radiogroup', { name: '2 sets of gains reach the point' })
    expect(await group.getByRole('radio').count()).toBe(2)
    await at.someone.page.locator('[data-test="gain-choice-1"]').check()
    await at.bench.awaitFigure('gain', kp(second))
    expect([await at.bench.reading('point-re'), await at.bench.reading('point-im')]).toEqual([-1, 1])
    expect(await at.someone.page.locator('[data-test="gain-choice-1"]').isChecked()).toBe(true)

    await at.someone.page.getByRole('button', { name: /undo/i }).first().click()
    await at.bench.awaitFigure('gain', kp(first))
    await expect.poll(() => at.someone.page.locator('[data-test="gain-choice-0"]').isChecked()).toBe(true)
  })
})

describe('the locus facts', () => {
  beforeEach(async () => {
    await at.bench.typeCoefficients({ numerator: '1', denominator: '1 3 2 0' })
    await at.bench.settled()
    await open('locus-facts')
    await at.someone.page.locator('[data-test="locus-fact"]', { hasText: 'Imaginary-axis crossing' }).getByText('1.41421j').waitFor()
  })

  // K. Ogata, "Modern Control Engineering", Example 6-1.
  it('stand in a table and are copied with every digit', async () => {
    await at.someone.context.grantPermissions(['clipboard-read', 'clipboard-write'])
    await at.someone.page.locator('[data-test="copy-facts"]').click()
    await at.someone.page.getByText('The table is copied, with every digit.').waitFor()
    const lines = (await at.someone.page.evaluate(() => navigator.clipboard.readText())).split('\n')
    expect(lines.slice(0, 3)).toEqual(['Type\t1', 'Relative degree\t3', 'Fact\tReal part (rad/s)\tImaginary part (rad/s)\tGain (k)\tAngle (deg)'])
    const crossing = lines.find(line => line.startsWith('Imaginary-axis crossing'))!.split('\t').map(Number)
    expect(crossing[2]).toBeCloseTo(Math.SQRT2, 14)
    expect(crossing[3]).toBeCloseTo(6, 13)
    expect(lines).toContain('Asymptote\t\t\t\t60')
  })

  it('are selected for the hand where the clipboard is closed', async () => {
    await at.someone.page.evaluate(() => Object.defineProperty(navigator, 'clipboard', { value: undefined }))
    await at.someone.page.locator('[data-test="copy-facts"]').click()
    await at.someone.page.getByText('The clipboard is closed to this page.').waitFor()
    expect(await at.someone.page.evaluate(() => window.getSelection()!.toString())).toContain('Imaginary-axis crossing')
  })

  it('say what the gain is for a form with several', async () => {
    expect(await at.bench.says('locus-note')).toContain('Gain: k.')
    await at.bench.chooseController('pd')
    await expect.poll(() => at.bench.says('locus-note')).toContain('Gain: factor on the present gains.')
  })
})
