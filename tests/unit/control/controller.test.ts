import { describe, expect, it } from 'vitest'
import { effectivePlant, loopFunctions, openLoop } from '#shared/control/controller'
import { InvalidInputError, NoAnswerError } from '#shared/control/errors'
import { evaluateAt, relativeDegree, series, systemType, transferFunction } from '#shared/control/transfer-function'
import type { Controller, Gains, LoopModel } from '#shared/control/types'
import { add, distance, divide, multiply, one } from '#shared/numerics/complex'

const servo: LoopModel = { plant: { numerator: [2], denominator: [1, 3, 0] }, rateFeedback: 0 }

const designs: [Controller, Gains][] = [
  [{ form: 'gain', shape: { numerator: [1, 2], denominator: [1, 20] } }, { k: 7 }],
  [{ form: 'pd' }, { kp: 4, kd: 0.5 }],
  [{ form: 'pi' }, { kp: 4, ki: 1.5 }],
  [{ form: 'lead', poleZeroRatio: 5 }, { k: 9, zero: -3, pole: -15 }],
]

describe('transfer functions', () => {
  it('trims, refuses what is none, connects in series, knows degree and type', () => {
    expect(transferFunction([0, 1], [0, 2, 0])).toEqual({ numerator: [1], denominator: [2, 0] })
    expect(() => transferFunction([1], [0])).toThrow(RangeError)
    expect(() => transferFunction([NaN], [1])).toThrow(RangeError)
    expect(series(servo.plant, servo.plant)).toEqual({ numerator: [4], denominator: [1, 6, 9, 0, 0] })
    expect(relativeDegree(servo.plant)).toBe(2)
    expect(systemType({ numerator: [1, 0], denominator: [1, 1, 0, 0] })).toBe(1)
    expect(systemType({ numerator: [1, 0], denominator: [1, 1] })).toBe(0)
  })
})

describe('loop functions', () => {
  const s = { re: -0.7, im: 1.3 }

  it.each(designs)('close the loop around %j with %j', (controller, gains) => {
    const f = loopFunctions(servo, controller, gains)
    const l = evaluateAt(f.loop, s)
    const onePlusL = add(one, l)
    expect(distance(evaluateAt(f.reference, s), divide(l, onePlusL))).toBeLessThan(1e-12)
    expect(distance(evaluateAt(f.error, s), divide(one, onePlusL))).toBeLessThan(1e-12)
    expect(distance(evaluateAt(f.disturbance, s), divide(evaluateAt(servo.plant, s), onePlusL))).toBeLessThan(1e-12)
    expect(distance(multiply(evaluateAt(f.effort, s), evaluateAt(servo.plant, s)), evaluateAt(f.reference, s))).toBeLessThan(1e-12)
    const l0 = evaluateAt(openLoop(servo, controller, gains), s)
    expect(distance(multiply(l0, { re: 'k' in gains ? gains.k : 1, im: 0 }), l)).toBeLessThan(1e-12)
  })

  it('put the rate gain into the loop but not into the path of the reference', () => {
    const f = loopFunctions(servo, { form: 'rate' }, { kp: 5, kr: 0.5 })
    expect(f.loop).toEqual({ numerator: [1, 10], denominator: [1, 3, 0] })
    expect(f.characteristic).toEqual([1, 4, 10])
    expect(f.reference.numerator).toEqual([10])
    expect(f.effort.numerator).toEqual([5, 15, 0])
    expect(f.error.numerator).toEqual([1, 4, 0])
  })

  it('see the plant through its inner rate feedback', () => {
    expect(effectivePlant({ ...servo, rateFeedback: 0.5 })).toEqual({ numerator: [2], denominator: [1, 4, 0] })
    const cancelling: LoopModel = { plant: { numerator: [1, 1], denominator: [1, 2, 3] }, rateFeedback: -1 }
    expect(() => effectivePlant(cancelling)).toThrow(NoAnswerError)
  })

  it('refuse an algebraic loop and a loop with more zeros than poles', () => {
    const feedthrough: LoopModel = { plant: { numerator: [1, 1], denominator: [1, 5] }, rateFeedback: 0 }
    expect(() => loopFunctions(feedthrough, { form: 'gain' }, { k: -1 })).toThrow(/algebraic/)
    expect(loopFunctions(feedthrough, { form: 'gain' }, { k: 1 }).characteristic).toEqual([2, 6])
    expect(() => loopFunctions(feedthrough, { form: 'pd' }, { kp: 1, kd: 1 })).toThrow(/more zeros than poles/)
    expect(() => openLoop(feedthrough, { form: 'pd' }, { kp: 1, kd: 1 })).toThrow(NoAnswerError)
  })

  it('refuse gains of another form, missing gains and a zero shape', () => {
    expect(() => loopFunctions(servo, { form: 'pd' }, { k: 1 })).toThrow(InvalidInputError)
    expect(() => loopFunctions(servo, { form: 'gain' }, { k: 1, zero: -1, pole: -2 })).toThrow(InvalidInputError)
    expect(() => openLoop(servo, { form: 'pd' })).toThrow(NoAnswerError)
    expect(() => openLoop(servo, { form: 'pi' }, { kp: 0, ki: 0 })).toThrow(NoAnswerError)
    expect(() => openLoop(servo, { form: 'gain', shape: { numerator: [0], denominator: [1] } })).toThrow(InvalidInputError)
  })

  it('take zero gains for an open loop', () => {
    const f = loopFunctions(servo, { form: 'gain' }, { k: 0 })
    expect(f.characteristic).toEqual([1, 3, 0])
    expect(f.reference.numerator).toEqual([0])
    expect(loopFunctions(servo, { form: 'pi' }, { kp: 2, ki: 0 }).characteristic).toEqual([1, 3, 4])
  })
})
