import { describe, expect, it } from 'vitest'
import { solveDesign } from '#shared/control/solve'
import type { LoopModel } from '#shared/control/types'
import { evaluateLoop } from '../../helpers/loops'

const unity = (numerator: number[], denominator: number[]) => evaluateLoop({ numerator, denominator }).steadyState

describe('type and error constants', () => {
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
