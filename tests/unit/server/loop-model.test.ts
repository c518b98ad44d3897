import { describe, expect, it } from 'vitest'
import { InvalidInputError } from '#shared/control/errors'
import type { ControllerForm, Loop } from '#shared/schemas/loop'
import { resolveController, resolveLoop } from '../../../server/utils/loop-model'

const plant = { form: 'coefficients', numerator: [1], denominator: [1, 1, 0] } as const
const asLoop = (loop: unknown) => loop as Loop

function thrown(work: () => unknown): unknown {
  try {
    work()
  } catch (error) {
    return error
  }
  return undefined
}

describe('a loop of a request', () => {
  it('is the same whichever way the plant is given', () => {
    const expected = { plant: { numerator: [2], denominator: [1, 2, 5, 0] }, rateFeedback: 0, deadTime: 0, actuatorLimit: undefined, sampling: undefined }
    const poles = [{ re: 0, im: 0 }, { re: -1, im: 2 }, { re: -1, im: -2 }]
    expect(resolveLoop({ plant: { form: 'coefficients', numerator: [0, 0, 2], denominator: [0, 1, 2, 5, 0] } })).toEqual(expected)
    expect(resolveLoop({ plant: { form: 'expression', expression: 'g/(s*(s^2+2*s+5))', parameters: { g: { value: 2 } } } })).toEqual(expected)
    expect(resolveLoop({ plant: { form: 'zeros-poles-gain', zeros: [], poles, gain: 2 } })).toEqual(expected)
  })

  it('makes pairs that differ in the last bits exact', () => {
    const poles = [{ re: -1, im: 2 }, { re: -1.0000000001, im: -2 }]
    expect(resolveLoop({ plant: { form: 'zeros-poles-gain', zeros: [], poles, gain: 1 } }).plant.denominator).toEqual([1, 2, 5])
  })

  it.each([
    ['a zero numerator', { ...plant, numerator: [0, 0] }, 'loop.plant.numerator'],
    ['a zero denominator', { ...plant, denominator: [0] }, 'loop.plant.denominator'],
    ['an improper plant', { ...plant, numerator: [1, 0, 0, 0] }, 'loop.plant.numerator'],
    ['an improper formula', { form: 'expression', expression: 's^3/(s+1)', parameters: {} }, 'loop.plant.expression'],
    ['a formula that is zero', { form: 'expression', expression: '0/s', parameters: {} }, 'loop.plant.expression'],
    ['a formula beyond order 20', { form: 'expression', expression: '1/(s+1)^21', parameters: {} }, 'loop.plant.expression'],
    ['a missing conjugate', { form: 'zeros-poles-gain', zeros: [], poles: [{ re: 0, im: 0 }, { re: -1, im: 2 }], gain: 1 }, 'loop.plant.poles.1'],
    ['poles beyond range', { form: 'zeros-poles-gain', zeros: [], poles: [{ re: -1e200, im: 0 }, { re: -1e200, im: 0 }], gain: 1 }, 'loop.plant.poles'],
    ['a zero gain', { form: 'zeros-poles-gain', zeros: [], poles: [{ re: 0, im: 0 }], gain: 0 }, 'loop.plant.gain'],
    ['more zeros than poles', { form: 'zeros-poles-gain', zeros: [{ re: -1, im: 0 }], poles: [], gain: 1 }, 'loop.plant.zeros'],
  ])('refuses %s and names the field', (_what, wrong, path) => {
    const error = thrown(() => resolveLoop(asLoop({ plant: wrong })))
    expect(error).toBeInstanceOf(InvalidInputError)
    expect((error as InvalidInputError).path).toBe(path)
  })

  it('takes dead time, limit and sampling as they are given, and none where they are not', () => {
    expect(resolveLoop(asLoop({ plant }))).toMatchObject({ rateFeedback: 0, deadTime: 0, actuatorLimit: undefined, sampling: undefined })
    expect(resolveLoop(asLoop({ plant, deadTime: 0.02, actuatorLimit: 4, samplePeriod: 0.001 })))
      .toMatchObject({ deadTime: 0.02, actuatorLimit: 4, sampling: { period: 0.001, computingDelay: false } })
    expect(resolveLoop(asLoop({ plant, samplePeriod: 0.001, computingDelay: 'one-sample' })).sampling).toEqual({ period: 0.001, computingDelay: true })
  })

  it('takes a sensor in any form of a plant, and names its fields', () => {
    const sensor = { form: 'zeros-poles-gain', zeros: [], poles: [{ re: -50, im: 0 }], gain: 50 }
    expect(resolveLoop(asLoop({ plant, sensor })).sensor).toEqual({ numerator: [50], denominator: [1, 50] })
    expect(thrown(() => resolveLoop(asLoop({ plant, sensor: { ...plant, numerator: [1, 0, 0, 0] } })))).toMatchObject({
      path: 'loop.sensor.numerator', message: expect.stringContaining('such a sensor is improper'),
    })
  })

  it('takes one third condition of a PID, no more and no less', () => {
    expect(resolveController({ form: 'pid', integralToDerivativeRatio: 4 })).toEqual({ form: 'pid', derivativeFilter: undefined, third: { integralToDerivativeRatio: 4 } })
    expect(resolveController({ form: 'pid', thirdPole: -3, derivativeFilter: 0.1 })).toEqual({ form: 'pid', derivativeFilter: 0.1, third: { pole: -3 } })
    for (const wrong of [{ form: 'pid' }, { form: 'pid', thirdPole: -3, integralToDerivativeRatio: 4 }] as ControllerForm[]) {
      expect(thrown(() => resolveController(wrong))).toMatchObject({ name: 'InvalidInputError', path: 'controller' })
    }
  })
})
