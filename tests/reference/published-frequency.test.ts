import { describe, expect, it } from 'vitest'
import { closeLoop } from '#shared/control/closed-loop'
import { frequencyResponse, type FrequencyOptions } from '#shared/control/frequency/frequency-response'
import { evaluateLoop, loopOf, product } from '../helpers/loops'
import { publishedCase } from '../helpers/published'
import { seededRandom } from '../helpers/random'

function over(numerator: number[], denominator: number[], options?: FrequencyOptions) {
  return frequencyResponse(closeLoop(loopOf(numerator, denominator), { form: 'gain' }, { k: 1 }), options)
}

/** L of a unity-feedback loop at one frequency. */
function at(numerator: number[], denominator: number[], w: number) {
  const found = over(numerator, denominator, { from: w, to: 2 * w, samples: 20 })
  return { db: found.magnitudeDb[0]!, deg: found.phaseDeg[0]! }
}

const decibels = (size: number) => 20 * Math.log10(size)

describe('published margins, read off the curves', () => {
  it(publishedCase('D01').title, () => {
    const d01 = publishedCase('D01')
    const denominator = product([1, 0], [1, 1], [1, 5])
    const gains = d01.inputs('K')
    const { readings } = evaluateLoop({ numerator: [gains[0]!], denominator })
    d01.holds('GM_dB', gains.map(k => -at([k], denominator, readings.phaseCrossover!).db))
    expect(at([1], denominator, readings.phaseCrossover!).deg).toBeCloseTo(-180, 9)
    d01.holds('PM_deg', gains.map((k) => {
      const crossover = evaluateLoop({ numerator: [k], denominator }).readings.gainCrossover!
      expect(at([k], denominator, crossover).db).toBeCloseTo(0, 9)
      return 180 + at([k], denominator, crossover).deg
    }))
  })

  it(publishedCase('D03').title, () => {
    const d03 = publishedCase('D03')
    const phaseMargin = (numerator: number[], denominator: number[]) =>
      180 + at(numerator, denominator, evaluateLoop({ numerator, denominator }).readings.gainCrossover!).deg
    d03.holds('nise_PM', phaseMargin([6], product([1, 2, 2], [1, 2])))
    d03.holds('dorf1_PM', phaseMargin([1], product([1, 0], [1, 1], [0.2, 1])))
    d03.holds('dorf2_PM', phaseMargin([0.64], [1, 1, 1, 0]))
    // The closed-loop peak of the last system is the largest |T|.
    const found = over([0.64], [1, 1, 1, 0], { from: 0.886, to: 0.8866, samples: 2000 })
    d03.holds('dorf2_Mpw_dB', Math.max(...found.complementaryDb), 1e-6)
    d03.holds('dorf2_wr', found.frequency[found.complementaryDb.indexOf(Math.max(...found.complementaryDb))]!, 1e-4)
  })

  it(publishedCase('D07').title, () => {
    const d07 = publishedCase('D07')
    const random = seededRandom(77)
    d07.inputs('Ms').forEach((most, index) => {
      // Any stable loop whose |S| stays below Ms has at least the published margins.
      let checked = 0
      while (checked < 25) {
        const loop = { numerator: [Math.exp(4 * random() - 4)], denominator: product([1, 0], ...[0, 1].map(() => [1, Math.exp(3 * random() - 1)])) }
        const { stable, readings } = evaluateLoop(loop)
        if (!stable || Math.max(...over(loop.numerator, loop.denominator).sensitivityDb) > decibels(most) - 0.01) continue
        expect(180 + at(loop.numerator, loop.denominator, readings.gainCrossover!).deg).toBeGreaterThan(d07.exact('PM_deg')[index]!)
        expect(-at(loop.numerator, loop.denominator, readings.phaseCrossover!).db).toBeGreaterThan(decibels(d07.exact('GM')[index]!))
        checked++
      }
    })
  })
})
