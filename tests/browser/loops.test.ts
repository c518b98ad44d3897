import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { BenchPage } from '../helpers/bench-page'
import type { Visitor } from '../helpers/browser'
import { stage } from '../helpers/stage'

const { visit } = stage()

let someone: Visitor
let bench: BenchPage

beforeEach(async () => {
  someone = await visit()
  bench = await new BenchPage(someone.page).open('/')
})
afterEach(() => someone.leave())

/** Figures of the closed loop by hand: 1/(s(s + 1)) needs nothing but a pencil. */
describe('loops beyond one gain', () => {
  beforeEach(async () => {
    await bench.typeCoefficients({ numerator: '1', denominator: '1 1 0' })
    await bench.settled()
  })

  it('places a PID by its third root', async () => {
    await bench.chooseController('pid')
    await someone.page.locator('[data-test="third-condition"]').selectOption('pole')
    await bench.type('third-pole', -5)
    await bench.placePoint(0.8, 2.5)
    // (s + 5)(s² + 4 s + 6.25) = s³ + 9 s² + 26.25 s + 31.25 against s³ + (1 + kd) s² + kp s + ki
    await bench.awaitFigure('gain', value => expect(value).toBeCloseTo(26.25, 9))
    const roots = await someone.page.locator('[data-test="root"]').allInnerTexts()
    expect(roots.map(text => text.replace(/\u2212/g, '-')).join(' ')).toMatch(/-2\.00 ± 1\.50j.*-5\.00/s)
  })

  it('reckons with the filter of a derivative, which makes the peak effort finite', async () => {
    await bench.chooseController('pd')
    await bench.placePoint(0.6, 2)
    expect(await bench.says('peak-effort')).toBe('impulse')
    await bench.type('derivative-filter', 0.02)
    await bench.awaitFigure('peak-effort', value => expect(value).toBeGreaterThan(1))
    expect(await someone.page.locator('[data-test="root"]').count()).toBe(2)
  })

  it('closes the loop through a sensor, which stands in the diagram too', async () => {
    await someone.page.locator('[data-test="with-sensor"]').check()
    await bench.type('sensor-numerator', '2')
    await bench.type('sensor-denominator', '1')
    // With H = 2 the output settles at half of the reference.
    await bench.awaitFigure('step-error', value => expect(value).toBeCloseTo(0.5, 12))
    expect(await someone.page.locator('[data-test="block-diagram"]').getAttribute('aria-label')).toContain('through the sensor')
  })

  it('offers a lag that begins well below the design point, and says what it leaves over', async () => {
    await bench.placePoint(0.5, 1)
    await bench.chooseController('lag')
    await bench.awaitFigure('leftover-angle', value => expect(Math.abs(value)).toBeGreaterThan(0.1))
    expect(await someone.page.locator('[data-test="lag-zero"]').inputValue()).toMatch(/0\.1/)
    await bench.type('pole-zero-ratio', 0.5)
    await bench.type('lag-zero', 2)
    await someone.page.getByText('less than 0').first().waitFor()
  })
})
