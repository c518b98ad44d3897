import type { Page } from 'playwright-core'
import { expect } from 'vitest'
import { figure, shown, waitForFigure } from './browser'

export interface Place { x: number, y: number }

/** The bench as a hand and an eye use it. Figures come at full precision; `says` gives them as they are shown. */
export class BenchPage {
  constructor(readonly page: Page) {}

  /** Opens a page with a bench and waits until it answers: alive, with a gain. */
  async open(path: string): Promise<this> {
    await this.page.goto(path)
    await this.ready()
    return this
  }

  async ready() {
    await this.page.locator('[data-test="plane"][data-point-x]').waitFor()
    await waitForFigure(this.page, 'gain', value => expect(Number.isFinite(value)).toBe(true))
  }

  gain = () => figure(this.page, 'gain')
  reading = (name: string) => figure(this.page, name)
  says = (name: string) => shown(this.page, name)
  awaitFigure = (name: string, check: (value: number) => void) => waitForFigure(this.page, name, check)

  /** Where the design point, the grip and the ticks stand on the screen. */
  async places(): Promise<{ point: Place, grip: Place, ticks: Place[] }> {
    const plane = this.plane()
    const box = (await plane.boundingBox())!
    const data = await plane.evaluate(element => ({ ...(element as HTMLElement).dataset }))
    const onScreen = (x: number, y: number): Place => ({ x: box.x + x, y: box.y + y })
    return {
      point: onScreen(Number(data.pointX), Number(data.pointY)),
      grip: onScreen(Number(data.gripX), Number(data.gripY)),
      ticks: (JSON.parse(data.ticks ?? '[]') as Place[]).map(({ x, y }) => onScreen(x, y)),
    }
  }

  plane() {
    return this.page.locator('[data-test="plane"][data-point-x]')
  }

  /** Takes the design point by the mouse and moves it by so many pixels. */
  async dragPointBy(dx: number, dy: number) {
    const { point } = await this.places()
    const { mouse } = this.page
    await mouse.move(point.x, point.y)
    await mouse.down()
    for (let step = 1; step <= 8; step += 1) await mouse.move(point.x + dx * step / 8, point.y + dy * step / 8)
    await mouse.up()
  }

  /** The same with one finger. */
  async touchDragPointBy(dx: number, dy: number) {
    const { point } = await this.places()
    const session = await this.page.context().newCDPSession(this.page)
    const touch = (type: 'touchStart' | 'touchMove' | 'touchEnd', touchPoints: Place[]) => session.send('Input.dispatchTouchEvent', { type, touchPoints })
    await touch('touchStart', [point])
    for (let step = 1; step <= 8; step += 1) await touch('touchMove', [{ x: point.x + dx * step / 8, y: point.y + dy * step / 8 }])
    await touch('touchEnd', [])
    await session.detach()
  }

  async press(...keys: string[]) {
    await this.plane().focus()
    for (const key of keys) await this.page.keyboard.press(key)
  }

  /** Types a figure into a field and leaves it by Enter. */
  async type(field: string, value: number | string) {
    const input = this.page.locator(`[data-test="${field}"]`)
    await input.focus()
    await input.fill(String(value))
    await input.press('Enter')
  }

  async placePoint(dampingRatio: number, naturalFrequency: number) {
    await this.type('zeta', dampingRatio)
    await this.type('omega-n', naturalFrequency)
    await this.settled()
  }

  /** Waits until the figures are those of the design point as it stands now. */
  async settled() {
    await expect.poll(async () => {
      const [re = Number.NaN, im = Number.NaN] = (await this.page.locator('[data-test="plate"]').getAttribute('data-solved') ?? '').split(',').map(Number)
      const [wantedRe, wantedIm] = [await this.reading('point-re'), await this.reading('point-im')]
      return Math.hypot(re - wantedRe, im - wantedIm) <= 1e-9 * Math.hypot(wantedRe, wantedIm)
    }, { timeout: 10_000, interval: 30 }).toBe(true)
  }

  /** Clicks a tick of the ray, after zooming out as far as it takes to see it clear of the grip. */
  async clickTick(index: number) {
    const box = (await this.plane().boundingBox())!
    const margin = 30
    await this.press('f')
    for (let zooms = 0; zooms < 20; zooms += 1) {
      const { ticks, grip } = await this.places()
      const tick = ticks[index]
      if (!tick) throw new Error(`There are ${ticks.length} meetings of ray and locus, none number ${index + 1}.`)
      const clearOfGrip = Math.hypot(tick.x - grip.x, tick.y - grip.y) > margin
      if (clearOfGrip && tick.x > box.x + margin && tick.y > box.y + margin) return this.page.mouse.click(tick.x, tick.y)
      await this.press('-')
    }
    throw new Error('The tick stays out of sight.')
  }

  /** Types a gain in place of the large figure. */
  async typeGain(value: number) {
    await this.page.locator('[data-test="gain"]').click()
    const input = this.page.locator('[data-test="gain-input"]')
    await input.fill(String(value))
    await input.press('Enter')
  }

  /** The response as it is drawn, to tell whether it changed. */
  responseCurve = () => this.page.locator('[data-test="response-curve"]').getAttribute('d')

  async choosePlant(form: 'expression' | 'coefficients' | 'zeros-poles-gain') {
    await this.page.locator(`[data-test="plant-form-${form}"]`).check({ force: true })
  }

  async typePlaces(plant: { zeros: string, poles: string, gain: number }) {
    await this.choosePlant('zeros-poles-gain')
    await this.type('zeros', plant.zeros)
    await this.type('poles', plant.poles)
    await this.type('plant-gain', plant.gain)
  }

  async typeCoefficients(plant: { numerator: string, denominator: string }) {
    await this.choosePlant('coefficients')
    await this.type('numerator', plant.numerator)
    await this.type('denominator', plant.denominator)
  }

  async typeFormula(formula: string) {
    await this.choosePlant('expression')
    await this.type('formula', formula)
  }

  async chooseController(form: 'gain' | 'pd' | 'pi' | 'pid' | 'rate' | 'lead' | 'lag') {
    await this.page.locator('[data-test="controller-form"]').selectOption(form)
  }
}
