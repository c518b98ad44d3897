import { describe, expect, it } from 'vitest'
import { solveDesign } from '#shared/control/solve'
import type { LoopModel } from '#shared/control/types'
import { evaluateLoop, loopOf, product } from '../../helpers/loops'
import { publishedCase } from '../../helpers/published'

const unity = (numerator: number[], denominator: number[]) => evaluateLoop({ numerator, denominator }).steadyState

describe('type and error constants', () => {
  const f01 = publishedCase('F01')
  it(f01.title, () => {
    const lags = product([1, 8], [1, 10], [1, 12])
    const zero = unity(product([500], [1, 2], [1, 5]), lags)
    expect(zero).toMatchObject({ type: 0, velocityConstant: 0, accelerationConstant: 0, errorParabola: null })
    f01.holds('Kp', zero.positionConstant, 1e-12)
    const one = unity(product([500], [1, 2], [1, 5], [1, 6]), product([1, 0], lags))
    expect(one).toMatchObject({ type: 1, positionConstant: null, accelerationConstant: 0, errorParabola: null })
    f01.holds('Kv', one.velocityConstant, 1e-12)
    const two = unity(product([500], [1, 2], [1, 4], [1, 5], [1, 6], [1, 7]), product([1, 0, 0], lags))
    expect(two).toMatchObject({ type: 2, positionConstant: null, velocityConstant: null, errorParabola: expect.closeTo(1 / 875, 14) })
    f01.holds('Ka', two.accelerationConstant, 1e-12)
    const [k] = f01.exact('K_10pct_ramp')
    expect(unity([k!, 5 * k!], product([1, 0], [1, 6], [1, 7], [1, 8])).velocityConstant).toBeCloseTo(10, 12)
  })

  const f04 = publishedCase('F04')
  it(f04.title, () => {
    // 8/(s² + 2 s) with 8 a s around it: the ramp error is 1/Kv of the loop with unity feedback and the same error.
    const [a] = f04.exact('a')
    const { steadyState, readings } = solveDesign(loopOf([8], [1, 2, 0]), { form: 'rate' }, { gains: { kp: 1, kr: a! } })
    expect(steadyState.type).toBe(1)
    f04.holds('ess1', 1 / steadyState.velocityConstant!, 1e-12)
    expect(readings.steadyStateErrorRamp).toBeCloseTo(1 / steadyState.velocityConstant!, 14)
  })

  const b10 = publishedCase('B10')
  it(b10.title, () => {
    b10.holds('Kv0', unity([1.06], product([1, 0], [1, 1], [1, 2])).velocityConstant, 1e-12)
    const [k] = b10.exact('Kc')
    b10.holds('Kv', unity([1.06 * k!, 1.06 * k! * 0.05], product([1, 0], [1, 1], [1, 2], [1, 0.005])).velocityConstant, 1e-12)
  })

  it('count three integrators, and leave every constant without limit', () => {
    expect(unity([3, 3, 1], [1, 0, 0, 0])).toEqual({ type: 3, positionConstant: null, velocityConstant: null, accelerationConstant: null, errorParabola: 0 })
  })

  it('are 0 where the loop is: a zero at the origin, or no gain', () => {
    expect(unity([1, 0], [1, 3, 2])).toEqual({ type: 0, positionConstant: 0, velocityConstant: 0, accelerationConstant: 0, errorParabola: null })
    expect(unity([0], [1, 3, 2])).toEqual({ type: 0, positionConstant: 0, velocityConstant: 0, accelerationConstant: 0, errorParabola: null })
  })

  it('exist in an unstable loop, whose errors do not', () => {
    expect(unity([60], [1, 3, 2, 0])).toEqual({ type: 1, positionConstant: null, velocityConstant: 30, accelerationConstant: 0, errorParabola: null })
    expect(unity([-2], [1, 1, 0, 0])).toMatchObject({ type: 2, accelerationConstant: -2, errorParabola: null })
  })
})

describe('behind a sensor', () => {
  const servo = { numerator: [1], denominator: [1, 1, 0] }
  const behind = (numerator: number[], denominator: number[]): LoopModel => ({ plant: servo, sensor: { numerator, denominator }, rateFeedback: 0 })
  const at = (model: LoopModel) => solveDesign(model, { form: 'gain' }, { gains: { k: 1 } })

  it('the constants are those of the true error, not of what the sensor shows', () => {
    // T = (s + 10)/(s³ + 11 s² + 10 s + 10), so T/(1 - T) = (s + 10)/(s (s² + 11 s + 9)): Kv = 10/9, where the loop transfer alone has 1.
    const { steadyState, readings } = at(behind([10], [1, 10]))
    expect(steadyState).toMatchObject({ type: 1, positionConstant: null, velocityConstant: expect.closeTo(10 / 9, 14), accelerationConstant: 0 })
    expect(readings.steadyStateErrorRamp).toBeCloseTo(0.9, 14)
  })

  it('a gain other than 1 leaves an error after a step in spite of the integrator', () => {
    // T(0) = 1/2: the loop with that error and unity feedback has Kp = 1.
    expect(at(behind([2], [1])).steadyState).toMatchObject({ type: 0, positionConstant: expect.closeTo(1, 14), velocityConstant: 0 })
  })

  it('a loop without any error has no type', () => {
    // G = 2, H = 1/2: T = 2/(1 + 1) = 1 at every frequency.
    const model: LoopModel = { plant: { numerator: [2], denominator: [1] }, sensor: { numerator: [0.5], denominator: [1] }, rateFeedback: 0 }
    expect(at(model).steadyState).toEqual({ type: null, positionConstant: null, velocityConstant: null, accelerationConstant: null, errorParabola: 0 })
  })
})

it('the error after a parabola has the sign and size of the reference', () => {
  const { steadyState } = evaluateLoop({ numerator: [4, 2], denominator: [1, 0, 0] }, { response: { amplitude: -3 } })
  // Ka = 2: -3 t²/2 leaves -3/2.
  expect(steadyState.errorParabola).toBeCloseTo(-1.5, 14)
})
