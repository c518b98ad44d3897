import { describe, expect, it } from 'vitest'
import { margins } from '#shared/control/frequency/margins'
import { evaluateLoop, loopOf, product } from '../helpers/loops'
import { solveDesign } from '#shared/control/solve'
import { expectClose, publishedCase } from '../helpers/published'
import { seededRandom } from '../helpers/random'

describe('published margins', () => {
  const d01 = publishedCase('D01')
  it(d01.title, () => {
    const plant = loopOf([1], product([1, 0], [1, 1], [1, 5]))
    const solutions = d01.inputs('K').map(k => solveDesign(plant, { form: 'gain' }, { gains: { k } }))
    expect(solutions.map(({ stable }) => stable)).toEqual([true, false])
    const [stable, unstable] = solutions.map(({ readings }) => readings)
    d01.holds('GM_factor', [stable!.gainMargin.upper, unstable!.gainMargin.lower])
    expect([stable!.gainMargin.lower, unstable!.gainMargin.upper]).toEqual([null, null])
    d01.holds('GM_dB', [stable!.gainMarginDb, unstable!.gainMarginDb])
    d01.holds('PM_deg', [stable!.phaseMarginDeg, unstable!.phaseMarginDeg])
    d01.holds('w_180', stable!.phaseCrossover)
    d01.holds('Kcr', solveDesign(plant, { form: 'gain' }, { gains: { k: 1 } }).readings.gainMargin.upper)
  })

  const d03 = publishedCase('D03')
  it(d03.title, () => {
    const nise = evaluateLoop({ numerator: [6], denominator: product([1, 2, 2], [1, 2]) }).readings
    d03.holds('nise_GM_dB', nise.gainMarginDb)
    d03.holds('nise_PM', nise.phaseMarginDeg)
    d03.holds('nise_wc', nise.gainCrossover)
    const first = evaluateLoop({ numerator: [1], denominator: product([1, 0], [1, 1], [0.2, 1]) }).readings
    d03.holds('dorf1_GM_dB', first.gainMarginDb)
    d03.holds('dorf1_PM', first.phaseMarginDeg)
    d03.holds('dorf2_PM', evaluateLoop({ numerator: [0.64], denominator: [1, 1, 1, 0] }).readings.phaseMarginDeg)
  })

  const d07 = publishedCase('D07')
  it(d07.title, () => {
    const guaranteedGain = (peak: number) => peak / (peak - 1)
    const guaranteedPhase = (peak: number) => 2 * Math.asin(1 / (2 * peak)) * 180 / Math.PI
    d07.holds('GM', d07.inputs('Ms').map(guaranteedGain))
    d07.holds('PM_deg', d07.inputs('Ms').map(guaranteedPhase))
    const random = seededRandom(7)
    let checked = 0
    while (checked < 200) {
      const denominator = product([1, 0], ...[0, 1, 2].map(() => [1, Math.exp(4 * random() - 2)]))
      const { stable, readings } = evaluateLoop({ numerator: [Math.exp(6 * random() - 4)], denominator })
      if (!stable) continue
      checked++
      const peak = readings.sensitivityPeak!
      expect(readings.gainMargin.upper!).toBeGreaterThanOrEqual(guaranteedGain(peak) * (1 - 1e-12))
      expect(readings.phaseMarginDeg!).toBeGreaterThanOrEqual(guaranteedPhase(peak) * (1 - 1e-12))
    }
  })

  it('one pole and an integrator: closed forms', () => {
    // L = 1/(s (s + 1)): |L| = 1 at w^2 = (sqrt 5 - 1)/2; the phase never reaches -180 degrees.
    const found = margins({ numerator: [1], denominator: [1, 1, 0] }, true)
    const crossover = Math.sqrt((Math.sqrt(5) - 1) / 2)
    expectClose(found.gainCrossover, crossover, 1e-14, 'gain crossover')
    expectClose(found.phaseMarginDeg, 90 - Math.atan(crossover) * 180 / Math.PI, 1e-14, 'phase margin')
    expectClose(found.delayMargin, (Math.PI / 2 - Math.atan(crossover)) / crossover, 1e-14, 'delay margin')
    expect(found.gainMargin).toEqual({ upper: null, lower: null })
  })
})
