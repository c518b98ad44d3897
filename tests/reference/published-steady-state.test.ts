import { describe, expect, it } from 'vitest'
import { solveDesign } from '#shared/control/solve'
import { evaluateLoop, loopOf, product } from '../helpers/loops'
import { publishedCase } from '../helpers/published'

const unity = (numerator: number[], denominator: number[]) => evaluateLoop({ numerator, denominator }).steadyState

describe('type and error constants, published', () => {
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
})
