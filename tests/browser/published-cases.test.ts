import { beforeEach, describe, expect, it } from 'vitest'
import { expectClose, publishedCase } from '../helpers/published'
import { benchStage } from '../helpers/stage'

const { at, begin } = benchStage()
begin()

/**
 * The main job on real input: plants of published worked examples are typed into the bench, the point is placed by hand, and the
 * figures on the screen are the exact ones. Source and provenance are in the title of each case.
 */
const near = (value: number, wanted: number, relative = 1e-9) => expectClose(value, wanted, relative, 'figure on the bench')
const pointsTolerance = 1e-6
const nearPoints = (value: number, wanted: number) => expect(Math.abs(value - wanted)).toBeLessThanOrEqual(pointsTolerance)
const [b01, b05, c06, b14] = ['B01', 'B05', 'C06', 'B14'].map(publishedCase) as [Case, Case, Case, Case]
type Case = ReturnType<typeof publishedCase>

describe(`${b01.title}, typed as a formula`, () => {
  it('gives the gain 28/27 where the ray of damping ratio 0.5 meets the locus', async () => {
    await at.bench.typeFormula('1/(s*(s+1)*(s+2))')
    await at.bench.type('zeta', 0.5)
    await expect.poll(async () => (await at.bench.places()).ticks.length).toBe(1)
    await at.bench.clickTick(0)
    await at.bench.awaitFigure('gain', value => near(value, 28 / 27))
    b01.holds('zeta05_K', await at.bench.gain())
    b01.holds('zeta05_s', [await at.bench.reading('point-re'), await at.bench.reading('point-im')])
    expect(await at.bench.says('gain')).toBe('1.037')
  })
})

describe(`${b05.title}, typed as zeros and poles`, () => {
  it('goes to each meeting by a click on its tick, with the gain and the true overshoot of the whole loop', async () => {
    await at.bench.typePlaces({ zeros: '-1.5', poles: '0, -1, -10', gain: 1 })
    await at.bench.type('zeta', 0.8)
    await expect.poll(async () => (await at.bench.places()).ticks.length).toBe(3)
    const [gains, points, overshoots, settlings] = ['K', 's', 'exact_PO_percent', 'exact_ts2'].map(b05.exact) as [number[], number[], number[], number[]]
    const printed = [['7.336', '2.66 %', '4.515 s'], ['12.82', '4.94 %', '3.427 s'], ['39.62', '9.53 %', '1.568 s']]
    for (const index of [2, 0, 1]) {
      await at.bench.clickTick(index)
      await at.bench.awaitFigure('gain', value => near(value, gains[index]!))
      near(await at.bench.reading('point-re'), points[2 * index]!)
      near(await at.bench.reading('point-im'), points[2 * index + 1]!)
      await at.bench.awaitFigure('overshoot', value => nearPoints(value, overshoots[index]!))
      near(await at.bench.reading('settling-time'), settlings[index]!, 1e-7)
      expect([await at.bench.says('gain'), await at.bench.says('overshoot'), await at.bench.says('settling-time')]).toEqual(printed[index])
    }
  })
})

describe(`${c06.title}, typed as coefficients`, () => {
  /** s^3 + s^2 + 4 K s + K = (s^2 + 2 zeta w s + w^2)(s + p): 8 zeta w^2 - (3 + 4 zeta^2) w + 2 zeta = 0 and K = w^2 (1 - 2 zeta w). */
  const meetings = (zeta: number) => [-1, 1].map((sign) => {
    const b = 3 + 4 * zeta ** 2
    const frequency = (b + sign * Math.sqrt(b * b - 64 * zeta ** 2)) / (16 * zeta)
    return { frequency, gain: frequency ** 2 * (1 - 2 * zeta * frequency) }
  })
  beforeEach(() => at.bench.typeCoefficients({ numerator: '4 1', denominator: '1 1 0 0' }))

  it('offers both meetings of the ray of damping ratio 0.45', async () => {
    await at.bench.type('zeta', 0.45)
    await expect.poll(async () => (await at.bench.places()).ticks.length).toBe(2)
    for (const [index, { frequency, gain }] of meetings(0.45).entries()) {
      await at.bench.clickTick(index)
      await at.bench.awaitFigure('gain', value => near(value, gain))
      near(await at.bench.reading('omega-n'), frequency)
    }
  })

  it('shows the published figures of the symmetrical optimum, where the two meetings are one', async () => {
    await at.bench.placePoint(0.5, 0.5)
    await at.bench.awaitFigure('gain', value => near(value, 1 / 8))
    const [overshoot, , settling] = c06.exact('SO') as [number, number, number]
    await at.bench.awaitFigure('overshoot', value => nearPoints(value, overshoot))
    near(await at.bench.reading('settling-time'), settling, 1e-7)
    c06.holds('SO_PM_deg', await at.bench.reading('phase-margin'), 1e-8)
    expect([await at.bench.says('gain'), await at.bench.says('overshoot'), await at.bench.says('settling-time'), await at.bench.says('phase-margin')])
      .toEqual(['0.1250', '43.41 %', '16.55 s', '36.9°'])
  })
})

describe(b14.title, () => {
  beforeEach(() => at.bench.typeFormula('1/(s*(s+1))'))

  it('as a lead through the wanted point: zero, pole and gain are found, and the true overshoot is twice the estimate', async () => {
    // On the way there the lead of ten to one has no admissible zero for the point of the demo axis: the bench says so.
    at.someone.expectFailure(422, /\/api\/design\/solve/)
    await at.bench.chooseController('lead')
    await at.bench.type('pole-zero-ratio', 20 / b14.exact('zero')[0]!)
    await at.bench.type('point-re', -3.5)
    await at.bench.type('point-im', 3.5 * Math.sqrt(3))
    await at.bench.awaitFigure('gain', value => b14.holds('K', value))
    b14.holds('zero', -await at.bench.reading('gain-zero'))
    near(await at.bench.reading('gain-pole'), -20)
    // The case file gives the overshoot of the rounded zero 5.4; that of the exact zero was recomputed from the residues.
    await at.bench.awaitFigure('overshoot', value => nearPoints(value, 34.22019554844))
    expect(await at.bench.says('overshoot')).toBe('34.22 %')
    expect(await at.someone.page.locator('[data-test="row-overshoot"]').innerText()).toContain('16.3')
    expect(await at.bench.says('dominance-sentence')).toMatch(/^The zero at -5\.4 adds 20\.\d points of overshoot/)
  })

  it('as printed, (s + 5.4)/(s + 20) with the gain 127', async () => {
    await at.someone.page.locator('[data-test="with-shape"]').check()
    await at.bench.type('shape-numerator', '1 5.4')
    await at.bench.type('shape-denominator', '1 20')
    await at.bench.awaitFigure('gain', value => expect(Number.isFinite(value)).toBe(true))
    await at.bench.typeGain(127)
    await at.bench.awaitFigure('gain', value => near(value, 127))
    await at.bench.awaitFigure('overshoot', value => nearPoints(value, b14.exact('exact_PO_K127')[0]!))
    expect(await at.bench.says('overshoot')).toBe('34.21 %')
  })
})
