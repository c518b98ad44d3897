import { describe, expect, it } from 'vitest'
import { solveDesign } from '#shared/control/solve'
import type { Requirement } from '#shared/control/types'

const asked = (requirement: Requirement, plant: { numerator: number[], denominator: number[] }, gains: { kp: number, kd: number }) =>
  solveDesign({ plant, rateFeedback: 0 }, { form: 'pd' }, { gains }, { requirements: [requirement] }).verdicts[0]

describe('verdicts', () => {
  it('hold a steady-state error to its size, whichever its sign', () => {
    // 1/(s² - 4) with kp = 20: the final value is 20/16, the error 1 - 5/4.
    const plant = { numerator: [1], denominator: [1, 0, -4] }
    const at = (value: number) => asked({ reading: 'steadyStateErrorStep', limit: 'at-most', value }, plant, { kp: 20, kd: 6 })
    expect(at(0.05)).toMatchObject({ actual: expect.closeTo(-0.25, 12), met: false })
    expect(at(0.3)).toMatchObject({ met: true })
  })

  it.each([
    { reading: 'phaseMarginDeg', limit: 'at-least', value: -360 },
    { reading: 'gainMarginDb', limit: 'at-least', value: -1000 },
    { reading: 'delayMargin', limit: 'at-least', value: -1000 },
    { reading: 'bandwidth', limit: 'at-least', value: 0 },
    { reading: 'sensitivityPeak', limit: 'at-most', value: 1e6 },
  ] as const)('never take $reading of an unstable loop as met', (requirement) => {
    const unstable = { numerator: [1], denominator: [1, 3, 2, 0] }
    expect(asked(requirement, unstable, { kp: 60, kd: 0 })).toMatchObject({ met: false })
    expect(asked(requirement, unstable, { kp: 1, kd: 0.1 })).toMatchObject({ met: true })
  })
})
