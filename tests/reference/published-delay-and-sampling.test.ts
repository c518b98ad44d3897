import { describe, expect, it } from 'vitest'
import { analyzeLoop } from '#shared/control/analyze'
import { delayFactor } from '#shared/control/delay/quasi-polynomial'
import { sampledController } from '#shared/control/sampled/sampled-controller'
import { solveDesign } from '#shared/control/solve'
import type { LoopModel } from '#shared/control/types'
import { arg } from '#shared/numerics/complex'
import { publishedCase } from '../helpers/published'

/** e^(-s deadTime)/(time constant s + 1). */
const lagWithDelay = (deadTime: number, timeConstant: number): LoopModel => ({ plant: { numerator: [1], denominator: [timeConstant, 1] }, rateFeedback: 0, deadTime })

describe('a lag with dead time', () => {
  const d05 = publishedCase('D05')
  it(d05.title, () => {
    const model = lagWithDelay(d05.inputs('theta')[0]!, d05.inputs('tau')[0]!)
    const [crossing] = analyzeLoop(model, { form: 'gain' }).imaginaryAxisCrossings
    d05.holds('wco', crossing!.frequency)
    d05.holds('Kcu', crossing!.gain)
    // The same by the margins at a gain of 1.
    const { readings } = solveDesign(model, { form: 'gain' }, { gains: { k: 1 } })
    expect(readings.gainMargin.upper).toBeCloseTo(crossing!.gain, 9)
    expect(readings.phaseCrossover).toBeCloseTo(crossing!.frequency, 9)
    d05.holds('deg_per_rad', -arg(delayFactor({ re: 0, im: 1 }, 1)) * 180 / Math.PI)
  })

  const e03 = publishedCase('E03')
  it(e03.title, () => {
    const [crossing] = analyzeLoop(lagWithDelay(1, 1), { form: 'gain' }).imaginaryAxisCrossings
    e03.holds('wco', crossing!.frequency)
    e03.holds('Kcu', crossing!.gain)
  })
})

describe('a controller at samples', () => {
  const g01 = publishedCase('G01')
  it(g01.title, () => {
    const shape = { numerator: g01.inputs('num'), denominator: g01.inputs('den') }
    const { matrix, onError, row, errorGain } = sampledController({ form: 'gain', shape }, { k: 1 }, g01.inputs('T')[0]!)
    // (d z + (row b - d a))/(z - a), printed times 7.
    g01.holds('den_x7', [7, -7 * matrix[0]!])
    g01.holds('num_x7', [7 * errorGain, 7 * (row[0]! * onError[0]! - errorGain * matrix[0]!)])
  })
})
