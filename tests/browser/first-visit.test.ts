import { describe, expect, it } from 'vitest'
import { desktop, phone } from '../helpers/browser'
import { benchStage } from '../helpers/stage'

const { at, begin } = benchStage()

describe('the first visit', () => {
  begin(desktop)

  it('stands on a working demo axis, with one line that says what to do', async () => {
    expect(await at.bench.gain()).toBeGreaterThan(0)
    expect(await at.bench.says('gain')).not.toBe('–')
    await at.someone.page.getByText(/drag the point/i).first().waitFor()
  })

  it('answers a drag with another gain and another response, and undo takes it back as one step', async () => {
    const [gain, overshoot, curve] = [await at.bench.gain(), await at.bench.reading('overshoot'), await at.bench.responseCurve()]
    const { point } = await at.bench.places()
    await at.bench.dragPointBy(-60, -80)
    await at.bench.awaitFigure('gain', value => expect(value).not.toBeCloseTo(gain, 3))
    await at.bench.awaitFigure('overshoot', value => expect(value).not.toBeCloseTo(overshoot, 3))
    await expect.poll(() => at.bench.responseCurve()).not.toBe(curve)
    const moved = (await at.bench.places()).point
    expect(Math.hypot(moved.x - point.x, moved.y - point.y)).toBeGreaterThan(20)
    await at.someone.page.locator('[data-test="undo"]').click()
    await at.bench.awaitFigure('gain', value => expect(value).toBe(gain))
    await at.bench.awaitFigure('overshoot', value => expect(value).toBe(overshoot))
    expect(await at.someone.page.locator('[data-test="undo"]').isDisabled()).toBe(true)
  })

  it('keeps the damping ratio when the point is dragged along its ray', async () => {
    const dampingRatio = await at.bench.reading('zeta')
    const frequency = await at.bench.reading('omega-n')
    await at.bench.dragPointBy(-70, -90)
    await at.bench.awaitFigure('omega-n', value => expect(value).toBeGreaterThan(frequency * 1.1))
    expect(await at.bench.reading('zeta')).toBeCloseTo(dampingRatio, 9)
  })

  it('answers the arrow keys like a drag, finely with shift', async () => {
    const [gain, frequency, dampingRatio] = [await at.bench.gain(), await at.bench.reading('omega-n'), await at.bench.reading('zeta')]
    await at.bench.press('ArrowUp', 'ArrowUp', 'ArrowUp')
    const further = await at.bench.awaitFigure('omega-n', value => expect(value).toBeGreaterThan(frequency))
    await at.bench.awaitFigure('gain', value => expect(value).toBeGreaterThan(gain))
    expect(await at.bench.reading('zeta')).toBeCloseTo(dampingRatio, 9)
    await at.bench.press('Shift+ArrowUp')
    await at.bench.awaitFigure('omega-n', value => expect(value).toBeGreaterThan(further))
    expect(await at.bench.reading('omega-n') - further).toBeLessThan((further - frequency) / 3)
    await at.bench.press('ArrowLeft')
    await at.bench.awaitFigure('zeta', value => expect(value).toBeGreaterThan(dampingRatio + 0.005))
  })

  it('takes typed figures, and text that is no number stays with the reason beside it', async () => {
    await at.bench.placePoint(0.55, 0.9)
    await at.bench.awaitFigure('point-re', value => expect(value).toBeCloseTo(-0.55 * 0.9, 12))
    await at.bench.awaitFigure('point-im', value => expect(value).toBeCloseTo(0.9 * Math.sqrt(1 - 0.55 ** 2), 12))
    const gain = await at.bench.gain()
    await at.bench.type('zeta', 'brisk')
    await at.someone.page.getByText('“brisk” is not a number').first().waitFor()
    expect(await at.someone.page.locator('[data-test="zeta"]').inputValue()).toBe('brisk')
    expect(await at.bench.gain()).toBe(gain)
    await at.bench.type('zeta', 1.5)
    await at.someone.page.getByRole('alert').filter({ hasText: 'a damping ratio lies between' }).waitFor()
  })

  it('restores where a drag began when Escape is pressed', async () => {
    const { point } = await at.bench.places()
    const [gain, frequency] = [await at.bench.gain(), await at.bench.reading('omega-n')]
    const { mouse, keyboard } = at.someone.page
    await mouse.move(point.x, point.y)
    await mouse.down()
    await mouse.move(point.x - 40, point.y - 50, { steps: 4 })
    await at.bench.awaitFigure('omega-n', value => expect(value).toBeGreaterThan(frequency * 1.05))
    await keyboard.press('Escape')
    await mouse.up()
    await at.bench.awaitFigure('omega-n', value => expect(value).toBe(frequency))
    await at.bench.awaitFigure('gain', value => expect(value).toBe(gain))
  })

  it('keeps what was done when the page is reloaded, and offers the demo axis again', async () => {
    await at.bench.placePoint(0.5, 1.25)
    await at.bench.awaitFigure('omega-n', value => expect(value).toBeCloseTo(1.25, 12))
    const gain = await at.bench.awaitFigure('gain', value => expect(value).toBeGreaterThan(0))
    await at.someone.page.reload()
    await at.bench.ready()
    await at.bench.awaitFigure('omega-n', value => expect(value).toBeCloseTo(1.25, 12))
    await at.bench.awaitFigure('gain', value => expect(value).toBe(gain))
    await at.someone.page.getByRole('button', { name: 'Start with the demo axis' }).click()
    await at.bench.awaitFigure('omega-n', value => expect(value).not.toBeCloseTo(1.25, 3))
  })

  it('says that it waits, greys its figures and catches up when the server is out of reach for a while', async () => {
    at.someone.expectFailure(0, /\/api\//)
    await at.someone.page.route('**/api/design/solve', route => route.abort('connectionrefused'))
    const frequency = await at.bench.reading('omega-n')
    await at.bench.press('ArrowUp')
    await at.someone.page.locator('[data-test="waiting"]').waitFor()
    await at.someone.page.unroute('**/api/design/solve')
    await at.bench.press('ArrowUp')
    await at.someone.page.locator('[data-test="waiting"]').waitFor({ state: 'hidden' })
    await at.bench.awaitFigure('omega-n', value => expect(value).toBeGreaterThan(frequency))
  })
})

describe('the first visit with one finger at 390 x 844', () => {
  begin(phone)

  it('drags the point and does not scroll sideways', async () => {
    const [gain, curve] = [await at.bench.gain(), await at.bench.responseCurve()]
    await at.bench.touchDragPointBy(-40, -55)
    await at.bench.awaitFigure('gain', value => expect(value).not.toBeCloseTo(gain, 3))
    await expect.poll(() => at.bench.responseCurve()).not.toBe(curve)
    expect(await at.someone.page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(390)
  })
})
