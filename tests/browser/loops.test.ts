import { beforeEach, describe, expect, it } from 'vitest'
import { benchStage } from '../helpers/stage'

const { at, begin } = benchStage()
begin()

/** Figures of the closed loop by hand: 1/(s(s + 1)) needs nothing but a pencil. */
describe('loops beyond one gain', () => {
  beforeEach(async () => {
    await at.bench.typeCoefficients({ numerator: '1', denominator: '1 1 0' })
    await at.bench.settled()
  })

  it('places a PID by its third root', async () => {
    await at.bench.chooseController('pid')
    await at.someone.page.locator('[data-test="third-condition"]').selectOption('pole')
    await at.bench.type('third-pole', -5)
    await at.bench.placePoint(0.8, 2.5)
    // (s + 5)(s² + 4 s + 6.25) = s³ + 9 s² + 26.25 s + 31.25 against s³ + (1 + kd) s² + kp s + ki
    await at.bench.awaitFigure('gain', value => expect(value).toBeCloseTo(26.25, 9))
    const roots = await at.someone.page.locator('[data-test="root"]').allInnerTexts()
    expect(roots.map(text => text.replace(/\u2212/g, '-')).join(' ')).toMatch(/-2\.00 ± 1\.50j.*-5\.00/s)
  })

  it('reckons with the filter of a derivative, which makes the peak effort finite', async () => {
    await at.bench.chooseController('pd')
    await at.bench.placePoint(0.6, 2)
    expect(await at.bench.says('peak-effort')).toBe('impulse')
    await at.bench.type('derivative-filter', 0.02)
    await at.bench.awaitFigure('peak-effort', value => expect(value).toBeGreaterThan(1))
    expect(await at.someone.page.locator('[data-test="root"]').count()).toBe(2)
  })

  it('closes the loop through a sensor, which stands in the diagram too', async () => {
    await at.someone.page.locator('[data-test="with-sensor"]').check()
    await at.bench.type('sensor-numerator', '2')
    await at.bench.type('sensor-denominator', '1')
    // With H = 2 the output settles at half of the reference.
    await at.bench.awaitFigure('step-error', value => expect(value).toBeCloseTo(0.5, 12))
    expect(await at.someone.page.locator('[data-test="block-diagram"]').getAttribute('aria-label')).toContain('through the sensor')
  })

  it('offers a lag that begins well below the design point, and says what it leaves over', async () => {
    await at.bench.placePoint(0.5, 1)
    await at.bench.chooseController('lag')
    await at.bench.awaitFigure('leftover-angle', value => expect(Math.abs(value)).toBeGreaterThan(0.1))
    expect(await at.someone.page.locator('[data-test="lag-zero"]').inputValue()).toMatch(/0\.1/)
    await at.bench.type('pole-zero-ratio', 0.5)
    await at.bench.type('lag-zero', 2)
    await at.someone.page.getByText('less than 0').first().waitFor()
  })
})

describe('the room for the gain', () => {
  const sentence = () => at.someone.page.locator('[data-test="room-sentence"]').innerText()

  it('is told with what ends it, and the gain moves along it by hand and by key', async () => {
    await expect.poll(sentence).toMatch(/^Every requirement is met from k = [\d.]+ \([a-z ]+\) to k = [\d.]+ \(overshoot\)\.$/)
    const [, low = '', high = ''] = /from k = ([\d.]+).* to k = ([\d.]+)/.exec(await sentence()) ?? []
    const gain = await at.bench.gain()
    expect(gain).toBeGreaterThan(Number(low))
    expect(gain).toBeLessThan(Number(high))

    const strip = at.someone.page.getByRole('slider', { name: 'Overall gain' })
    const box = (await strip.boundingBox())!
    await at.someone.page.mouse.move(box.x + box.width / 2, box.y + 6)
    await at.someone.page.mouse.down()
    await at.someone.page.mouse.move(box.x + box.width * 0.6, box.y + 6, { steps: 5 })
    await at.someone.page.mouse.up()
    // A tenth of the strip is a factor of 100^0.2.
    await at.bench.awaitFigure('gain', value => expect(value / gain).toBeCloseTo(100 ** 0.2, 1))
    await expect.poll(sentence).toMatch(/^Not here: every requirement is met from k/)

    const before = await at.bench.gain()
    await strip.focus()
    await at.someone.page.keyboard.press('ArrowLeft')
    await at.bench.awaitFigure('gain', value => expect(value * 1.02).toBeCloseTo(before, 6))
  })

  it('is said to be none where requirements exclude one another', async () => {
    await at.bench.placePoint(0.1, 4)
    await at.bench.chooseController('pd')
    await at.bench.typeCoefficients({ numerator: '1', denominator: '1 0 100 0' })
    await expect.poll(sentence, { timeout: 10_000 }).toMatch(/No gain meets every requirement|Not here/)
  })
})

describe('units', () => {
  const unitOf = (gain: string) => at.bench.says(`${gain}-unit`)

  it('stand beside the gains, and go where they are not known', async () => {
    expect(await unitOf('gain')).toBe('A')
    await at.bench.typeGain(20)
    await at.bench.awaitFigure('gain', value => expect(value).toBeCloseTo(20, 6))
    await at.bench.chooseController('pid')
    await expect.poll(() => unitOf('gain-kd')).toBe('A s')
    expect([await unitOf('gain'), await unitOf('gain-ki')]).toEqual(['A', 'A/s'])
    await at.bench.type('unit-J', '')
    await at.bench.type('unit-b', '')
    await expect.poll(() => at.someone.page.locator('[data-test$="-unit"]').count()).toBe(0)
  })

  it('are meant: a time constant in milliseconds makes another loop', async () => {
    const [gain, margin] = [await at.bench.gain(), await at.bench.reading('phase-margin')]
    // 0.09 ms in place of 0.09 s: the lag is all but gone.
    await at.bench.type('unit-T', 'ms')
    await at.bench.awaitFigure('phase-margin', value => expect(value).toBeGreaterThan(margin + 2))
    await at.bench.type('parameter-T', 90)
    await at.bench.awaitFigure('phase-margin', value => expect(value).toBeCloseTo(margin, 9))
    expect(await at.bench.gain()).toBeCloseTo(gain, 9)
  })

  it('mark unlike terms at their character, and an unknown unit at its parameter', async () => {
    at.someone.expectFailure(400, /\/api\/(design|loop)\//)
    await at.bench.type('unit-b', 'N m')
    const issue = at.someone.page.locator('[data-test="formula-issue"]')
    await issue.waitFor()
    expect(await issue.innerText()).toContain('J*s is in N m s, b in N m: unlike terms cannot be added')
    expect(await issue.locator('mark').innerText()).toBe('b')

    await at.bench.type('unit-b', 'N m seconds of arc')
    const row = at.someone.page.locator('.parameter', { has: at.someone.page.locator('[data-test="unit-b"]') })
    await row.getByRole('alert').waitFor()
    expect(await row.getByRole('alert').innerText()).toContain('the unit of is not known')
    expect(await at.someone.page.locator('[data-test="unit-b"]').getAttribute('aria-invalid')).toBe('true')
    await at.bench.type('unit-b', 'Nms/rad')
    await row.getByRole('alert').waitFor({ state: 'detached' })
    expect(await unitOf('gain')).toBe('A')
  })
})
