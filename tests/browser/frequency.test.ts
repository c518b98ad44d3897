import { describe, expect, it } from 'vitest'
import { desktop, phone } from '../helpers/browser'
import { benchStage } from '../helpers/stage'

const { at, begin } = benchStage()

/** The dimensions of the drawing, and the rows of their readings. */
const marks = { phaseMarginDeg: 'phase-margin', gainMarginDb: 'gain-margin', sensitivityPeak: 'sensitivity-peak', bandwidth: 'bandwidth' }

const chart = () => at.someone.page.locator('[data-test="frequency-chart"]')
const dimension = (reading: string) => at.bench.reading(`dimension-${reading}`)
const cursor = async () => Number(await chart().getAttribute('data-cursor') ?? Number.NaN)
const awaitCursor = (check: (frequency: number) => boolean) => expect.poll(async () => check(await cursor())).toBe(true)
const isNear = (row: string) => at.someone.page.locator(`[data-test="row-${row}"]`).evaluate(element => element.classList.contains('near'))
const markOnPlane = async () => Number(await at.bench.plane().getAttribute('data-frequency-y') || Number.NaN)

async function openFrequency() {
  await at.someone.page.locator('[data-test="tab-frequency"]').click()
  await chart().waitFor()
}

/** The frequency that a reading's row names, as it is shown. */
async function frequencyOf(row: string): Promise<number> {
  return Number(/at ([\d.]+)/.exec(await at.bench.says(`at-${row}`))![1])
}

describe('the loop over frequency', () => {
  begin(desktop)

  it('is asked for only while its tab is open, and shows the margins of the readings', async () => {
    const asked: string[] = []
    at.someone.page.on('request', request => request.url().endsWith('/api/loop/frequency') && asked.push(request.url()))
    await at.bench.press('ArrowUp')
    await at.bench.settled()
    expect(asked).toEqual([])
    await openFrequency()
    expect(asked).toHaveLength(1)
    for (const [mark, row] of Object.entries(marks)) expect(await dimension(mark), mark).toBe(await at.bench.reading(row))
    expect(await at.someone.page.locator('[data-test="frequency-words"]').textContent())
      .toMatch(/crosses 0 dB at .* phase margin .* gain margin .* sensitivity peak .* bandwidth/)
    await at.someone.page.locator('[data-test="tab-reference-step"]').click()
    await at.bench.press('ArrowUp')
    await at.bench.settled()
    expect(asked).toHaveLength(1)
    expect(await chart().count()).toBe(0)
  })

  it('follows the hand', async () => {
    await openFrequency()
    const [margin, curve] = [await dimension('phaseMarginDeg'), await at.someone.page.locator('[data-test="curve-L"]').getAttribute('d')]
    await at.bench.dragPointBy(-40, -60)
    await at.bench.settled()
    await expect.poll(() => dimension('phaseMarginDeg')).not.toBeCloseTo(margin, 3)
    await expect.poll(async () => await dimension('phaseMarginDeg') - await at.bench.reading('phase-margin')).toBe(0)
    expect(await at.someone.page.locator('[data-test="curve-L"]').getAttribute('d')).not.toBe(curve)
  })

  it('links the cursor with plane and readings, and catches a marked frequency', async () => {
    await openFrequency()
    const crossover = await frequencyOf('phase-margin')
    const line = (await at.someone.page.locator('[data-test="dimension-phaseMarginDeg"]').locator('xpath=..').locator('.arrows').boundingBox())!
    await at.someone.page.mouse.move(line.x + line.width / 2 + 3, line.y + 20)
    await awaitCursor(frequency => Math.abs(frequency / crossover - 1) < 0.01)
    await expect.poll(() => isNear('phase-margin')).toBe(true)
    expect(await isNear('gain-margin')).toBe(false)
    expect(await at.someone.page.locator('[data-test="frequency-reads"]').first().textContent()).toMatch(/rad\/s.*L [−]?0\.0\sdB.*phase/)
    await expect.poll(markOnPlane).toBeGreaterThan(0)
    const box = (await at.bench.plane().boundingBox())!
    await at.someone.page.mouse.move(box.x + 5, box.y + 5)
    await awaitCursor(Number.isNaN)
    expect(await markOnPlane()).toBeNaN()
  })

  it('is moved by hovering a reading, and by the focus on its frequency', async () => {
    await openFrequency()
    await at.someone.page.locator('[data-test="row-gain-margin"]').hover()
    const crossing = await frequencyOf('gain-margin')
    await awaitCursor(frequency => Math.abs(frequency / crossing - 1) < 0.01)
    expect(await isNear('gain-margin')).toBe(true)
    await at.someone.page.locator('[data-test="row-rise-time"]').hover()
    await awaitCursor(Number.isNaN)
    await at.someone.page.locator('[data-test="at-bandwidth"]').focus()
    const bandwidth = await at.bench.reading('bandwidth')
    await awaitCursor(frequency => frequency === bandwidth)
    await expect.poll(() => isNear('bandwidth')).toBe(true)
  })

  it('is moved from the imaginary axis of the plane, in proportion', async () => {
    await openFrequency()
    await at.someone.page.locator('[data-test="at-phase-margin"]').focus()
    await expect.poll(markOnPlane).toBeGreaterThan(0)
    const [crossover, height] = [await cursor(), await markOnPlane()]
    const x = Number(await at.bench.plane().getAttribute('data-frequency-x'))
    await at.someone.page.locator('[data-test="at-sensitivity-peak"]').focus()
    await expect.poll(markOnPlane).not.toBe(height)
    const scale = (height - await markOnPlane()) / (await cursor() - crossover)
    const box = (await at.bench.plane().boundingBox())!
    await at.someone.page.mouse.move(box.x + x + 2, box.y + height - 30)
    await awaitCursor(frequency => Math.abs(frequency - (crossover + 30 / scale)) < 1.5 / scale)
    await at.someone.page.mouse.move(box.x + x + 40, box.y + height - 30)
    await awaitCursor(Number.isNaN)
  })

  it('goes by key: step by step, from mark to mark, to the ends', async () => {
    await openFrequency()
    await chart().focus()
    const { keyboard } = at.someone.page
    await keyboard.press('ArrowRight')
    await awaitCursor(Number.isFinite)
    const begun = await cursor()
    await keyboard.press('ArrowRight')
    await awaitCursor(frequency => frequency > begun)
    const further = await cursor()
    await keyboard.press('Shift+ArrowLeft')
    await awaitCursor(frequency => frequency < further && frequency > begun)
    await keyboard.press('Home')
    await awaitCursor(frequency => frequency < begun / 2)
    const frequencies: number[] = []
    for (const row of Object.values(marks)) frequencies.push(await frequencyOf(row))
    for (const mark of frequencies.sort((a, b) => a - b)) {
      await keyboard.press('PageUp')
      await awaitCursor(frequency => Math.abs(frequency / mark - 1) < 0.01)
    }
    expect(await chart().getAttribute('aria-valuetext')).toMatch(/rad\/s: loop .*\sdB at .*°, sensitivity .*\sdB, complementary sensitivity .*\sdB/)
    await keyboard.press('Escape')
    await awaitCursor(Number.isNaN)
  })

  it('turns to it by the arrow keys of the tabs and keeps the input for the way back', async () => {
    await at.someone.page.locator('[data-test="tab-disturbance-step"]').click()
    await at.someone.page.keyboard.press('ArrowRight')
    await chart().waitFor()
    await at.someone.page.keyboard.press('ArrowLeft')
    await at.someone.page.locator('[data-test="response"]').waitFor()
    expect(await at.someone.page.locator('[data-test="tab-disturbance-step"]').getAttribute('aria-selected')).toBe('true')
  })

  it('greys its curves while the server does not answer, and catches up', async () => {
    await openFrequency()
    at.someone.expectFailure(0, /\/api\//)
    await at.someone.page.route('**/api/loop/frequency', route => route.abort('connectionrefused'))
    await at.bench.press('ArrowUp')
    const strip = at.someone.page.locator('section[aria-label="Response"]')
    const isOld = () => strip.evaluate(element => element.classList.contains('old'))
    await expect.poll(isOld).toBe(true)
    await at.someone.page.unroute('**/api/loop/frequency')
    await expect.poll(isOld, { timeout: 10_000 }).toBe(false)
    await expect.poll(async () => await dimension('phaseMarginDeg') - await at.bench.reading('phase-margin')).toBe(0)
  })
})

describe('the loop over frequency at 390 x 844', () => {
  begin(phone)

  it('shows one drawing at a time, answers a finger and does not scroll sideways', async () => {
    await openFrequency()
    expect(await at.someone.page.locator('[data-test="pane-sensitivity"]').count()).toBe(0)
    await at.someone.page.locator('[data-test="show-sensitivity"]').tap()
    await at.someone.page.locator('[data-test="pane-sensitivity"]').waitFor()
    expect(await at.someone.page.locator('[data-test="pane-loop"]').count()).toBe(0)
    await chart().tap()
    await awaitCursor(Number.isFinite)
    expect(await at.someone.page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(390)
  })
})
