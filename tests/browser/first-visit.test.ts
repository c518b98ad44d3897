import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { BenchPage } from '../helpers/bench-page'
import { desktop, phone, type Visitor } from '../helpers/browser'
import { stage } from '../helpers/stage'

const { visit } = stage()

let someone: Visitor
let bench: BenchPage

const begin = (options: Parameters<typeof visit>[0] = desktop) => async () => {
  someone = await visit(options)
  bench = await new BenchPage(someone.page).open('/')
}
afterEach(() => someone.leave())

describe('the first visit', () => {
  beforeEach(begin())

  it('stands on a working demo axis, with one line that says what to do', async () => {
    expect(await bench.gain()).toBeGreaterThan(0)
    expect(await bench.says('gain')).not.toBe('–')
    await someone.page.getByText(/drag the point/i).first().waitFor()
  })

  it('answers a drag with another gain and another response, and undo takes it back as one step', async () => {
    const [gain, overshoot, curve] = [await bench.gain(), await bench.reading('overshoot'), await bench.responseCurve()]
    const { point } = await bench.places()
    await bench.dragPointBy(-60, -80)
    await bench.awaitFigure('gain', value => expect(value).not.toBeCloseTo(gain, 3))
    await bench.awaitFigure('overshoot', value => expect(value).not.toBeCloseTo(overshoot, 3))
    await expect.poll(() => bench.responseCurve()).not.toBe(curve)
    const moved = (await bench.places()).point
    expect(Math.hypot(moved.x - point.x, moved.y - point.y)).toBeGreaterThan(20)
    await someone.page.locator('[data-test="undo"]').click()
    await bench.awaitFigure('gain', value => expect(value).toBe(gain))
    await bench.awaitFigure('overshoot', value => expect(value).toBe(overshoot))
    expect(await someone.page.locator('[data-test="undo"]').isDisabled()).toBe(true)
  })

  it('keeps the damping ratio when the point is dragged along its ray', async () => {
    const dampingRatio = await bench.reading('zeta')
    const frequency = await bench.reading('omega-n')
    await bench.dragPointBy(-70, -90)
    await bench.awaitFigure('omega-n', value => expect(value).toBeGreaterThan(frequency * 1.1))
    expect(await bench.reading('zeta')).toBeCloseTo(dampingRatio, 9)
  })

  it('answers the arrow keys like a drag, finely with shift', async () => {
    const [gain, frequency, dampingRatio] = [await bench.gain(), await bench.reading('omega-n'), await bench.reading('zeta')]
    await bench.press('ArrowUp', 'ArrowUp', 'ArrowUp')
    const further = await bench.awaitFigure('omega-n', value => expect(value).toBeGreaterThan(frequency))
    await bench.awaitFigure('gain', value => expect(value).toBeGreaterThan(gain))
    expect(await bench.reading('zeta')).toBeCloseTo(dampingRatio, 9)
    await bench.press('Shift+ArrowUp')
    await bench.awaitFigure('omega-n', value => expect(value).toBeGreaterThan(further))
    expect(await bench.reading('omega-n') - further).toBeLessThan((further - frequency) / 3)
    await bench.press('ArrowLeft')
    await bench.awaitFigure('zeta', value => expect(value).toBeGreaterThan(dampingRatio + 0.005))
  })

  it('takes typed figures, and text that is no number stays with the reason beside it', async () => {
    await bench.placePoint(0.55, 0.9)
    await bench.awaitFigure('point-re', value => expect(value).toBeCloseTo(-0.55 * 0.9, 12))
    await bench.awaitFigure('point-im', value => expect(value).toBeCloseTo(0.9 * Math.sqrt(1 - 0.55 ** 2), 12))
    const gain = await bench.gain()
    await bench.type('zeta', 'brisk')
    await someone.page.getByText('“brisk” is not a number').first().waitFor()
    expect(await someone.page.locator('[data-test="zeta"]').inputValue()).toBe('brisk')
    expect(await bench.gain()).toBe(gain)
    await bench.type('zeta', 1.5)
    await someone.page.getByRole('alert').filter({ hasText: 'a damping ratio lies between' }).waitFor()
  })

  it('restores where a drag began when Escape is pressed', async () => {
    const { point } = await bench.places()
    const [gain, frequency] = [await bench.gain(), await bench.reading('omega-n')]
    const { mouse, keyboard } = someone.page
    await mouse.move(point.x, point.y)
    await mouse.down()
    await mouse.move(point.x - 40, point.y - 50, { steps: 4 })
    await bench.awaitFigure('omega-n', value => expect(value).toBeGreaterThan(frequency * 1.05))
    await keyboard.press('Escape')
    await mouse.up()
    await bench.awaitFigure('omega-n', value => expect(value).toBe(frequency))
    await bench.awaitFigure('gain', value => expect(value).toBe(gain))
  })

  it('keeps what was done when the page is reloaded, and offers the demo axis again', async () => {
    await bench.placePoint(0.5, 1.25)
    await bench.awaitFigure('omega-n', value => expect(value).toBeCloseTo(1.25, 12))
    const gain = await bench.awaitFigure('gain', value => expect(value).toBeGreaterThan(0))
    await someone.page.reload()
    await bench.ready()
    await bench.awaitFigure('omega-n', value => expect(value).toBeCloseTo(1.25, 12))
    await bench.awaitFigure('gain', value => expect(value).toBe(gain))
    await someone.page.getByRole('button', { name: 'Start with the demo axis' }).click()
    await bench.awaitFigure('omega-n', value => expect(value).not.toBeCloseTo(1.25, 3))
  })

  it('says that it waits, greys its figures and catches up when the server is out of reach for a while', async () => {
    someone.expectFailure(0, /\/api\//)
    await someone.page.route('**/api/design/solve', route => route.abort('connectionrefused'))
    const frequency = await bench.reading('omega-n')
    await bench.press('ArrowUp')
    await someone.page.locator('[data-test="waiting"]').waitFor()
    await someone.page.unroute('**/api/design/solve')
    await bench.press('ArrowUp')
    await someone.page.locator('[data-test="waiting"]').waitFor({ state: 'hidden' })
    await bench.awaitFigure('omega-n', value => expect(value).toBeGreaterThan(frequency))
  })
})

describe('the first visit with one finger at 390 x 844', () => {
  beforeEach(begin(phone))

  it('drags the point and does not scroll sideways', async () => {
    const [gain, curve] = [await bench.gain(), await bench.responseCurve()]
    await bench.touchDragPointBy(-40, -55)
    await bench.awaitFigure('gain', value => expect(value).not.toBeCloseTo(gain, 3))
    await expect.poll(() => bench.responseCurve()).not.toBe(curve)
    expect(await someone.page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(390)
  })
})
