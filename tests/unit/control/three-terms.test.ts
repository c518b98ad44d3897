import { describe, expect, it } from 'vitest'
import { effectivePlant, loopFunctions, openLoop } from '#shared/control/controller'
import { NoAnswerError } from '#shared/control/errors'
import { placeGains } from '#shared/control/placement'
import { solveDesign } from '#shared/control/solve'
import { evaluateAt } from '#shared/control/transfer-function'
import type { Controller, Gains, LoopModel, ThirdCondition } from '#shared/control/types'
import { add, distance, divide, multiply, one, type Complex } from '#shared/numerics/complex'
import { roots } from '#shared/numerics/roots'
import { loopOf, shaped } from '../../helpers/loops'

interface ThreeGains { kp: number, ki: number, kd: number }

const controllerOf = (third: ThirdCondition, filter: number | undefined): Controller => ({ form: 'pid', third, ...(filter ? { derivativeFilter: filter } : {}) })

describe('a PID', () => {
  it('comes with positive gains first, then with the larger integral gain', () => {
    const model = loopOf([1], [1, 3, 2, 0])
    const placement = placeGains(model, controllerOf({ integralToDerivativeRatio: 4 }, undefined), { re: -1, im: 1 })
    const all = [placement.gains, ...placement.alternatives] as ThreeGains[]
    for (const gains of all) {
      expect(gains.kp ** 2 / (gains.ki * gains.kd)).toBeCloseTo(4, 9)
      const f = loopFunctions(model, controllerOf({ pole: -1 }, undefined), gains)
      expect(Math.min(...roots(f.characteristic).map(root => distance(root, { re: -1, im: 1 })))).toBeLessThan(1e-9)
    }
    const keys = all.map(({ kp, ki, kd }) => [kp > 0 && ki > 0 && kd > 0 ? 1 : 0, ki] as const)
    expect(keys).toEqual([...keys].sort((a, b) => b[0] - a[0] || b[1] - a[1]))
  })

  it('comes as the one that is asked for, the others in their order', () => {
    // 1/s² at -1 + j: kp = 2 + 2t, kd = 2 + t, ki = 2t, and (2 + 2t)² = 8 t (2 + t) has the roots t = -1 ± sqrt 2.
    const double = loopOf([1], [1, 0, 0])
    const place = (alternative?: number) => placeGains(double, { form: 'pid', third: { integralToDerivativeRatio: 4 }, alternative }, { re: -1, im: 1 })
    const { gains: first, alternatives: [second, ...rest] } = place()
    expect([second !== undefined, rest]).toEqual([true, []])
    expect(place(1)).toEqual({ gains: second, alternatives: [first], leftoverAngle: 0, onLocus: true })
    expect(place(3)).toEqual(place())
  })

  it('makes a double root at a real point', () => {
    const model = loopOf([2], [1, 4, 3, 0])
    const { gains } = placeGains(model, controllerOf({ pole: -5 }, undefined), { re: -1.5, im: 0 })
    const closed = roots(loopFunctions(model, controllerOf({ pole: -5 }, undefined), gains).characteristic)
    expect(closed.filter(root => distance(root, { re: -1.5, im: 0 }) < 1e-6)).toHaveLength(2)
    expect(closed.filter(root => distance(root, { re: -5, im: 0 }) < 1e-9)).toHaveLength(1)
  })

  it('says so where no real gains do it', () => {
    // 1/s² at -1 + j: kp = 2 + 2t, kd = 2 + t, ki = 2t, and (2 + 2t)² = 2 r t (2 + t) has real roots from r = 2 on only.
    const double = loopOf([1], [1, 0, 0])
    expect(() => placeGains(double, controllerOf({ integralToDerivativeRatio: 1.9 }, undefined), { re: -1, im: 1 })).toThrow(NoAnswerError)
    expect(placeGains(double, controllerOf({ integralToDerivativeRatio: 2.1 }, undefined), { re: -1, im: 1 }).onLocus).toBe(true)
    expect(() => placeGains(loopOf([1], [1, 3, 2]), controllerOf({ pole: -2.5 }, undefined), { re: -2.5, im: 0 })).toThrow(NoAnswerError)
    expect(() => placeGains(loopOf([1], [1, 3, 2]), controllerOf({ pole: -2.5 }, undefined), { re: 0, im: 0 })).toThrow(/integrator/)
  })

  it('has a peak effort once the derivative is filtered, and tends to the ideal one as the filter shrinks', () => {
    const model = loopOf([1], [1, 3, 2, 0])
    const gains = { kp: 6, ki: 2, kd: 4 }
    const figures = (filter: number | undefined) => solveDesign(model, controllerOf({ pole: -1 }, filter), { gains }).readings
    expect(figures(undefined).peakEffort).toBeNull()
    // Just after the step the derivative part stands at kd/filter, the proportional part at kp.
    expect(figures(0.01).peakEffort).toBeCloseTo(6 + 4 / 0.01, 8)
    const ideal = figures(undefined).overshootPercent!
    expect(Math.abs(figures(1e-3).overshootPercent! - ideal)).toBeGreaterThan(1e-3)
    expect(Math.abs(figures(1e-6).overshootPercent! - ideal)).toBeLessThan(1e-3)
  })
})

describe('a filtered PD', () => {
  it('reaches its point with the filter in the loop', () => {
    const model = loopOf([3], [1, 2, 0])
    const controller: Controller = { form: 'pd', derivativeFilter: 0.05 }
    const point = { re: -4, im: 3 }
    const { gains } = placeGains(model, controller, point)
    expect(Math.min(...roots(loopFunctions(model, controller, gains).characteristic).map(root => distance(root, point)))).toBeLessThan(1e-10)
    expect(loopFunctions(model, controller, gains).loop.denominator).toHaveLength(4)
  })
})

describe('a lag', () => {
  it('is the one gain with its shape, and names its zero and pole', () => {
    const model = loopOf([1], [1, 3, 2, 0])
    const lag: Controller = { form: 'lag', poleZeroRatio: 0.1, zero: -0.05 }
    const shape = shaped([1, 0.05], [1, 0.005])
    const point = { re: -0.4, im: 0.6 }
    const [a, b] = [placeGains(model, lag, point), placeGains(model, shape, point)]
    expect(a.gains).toEqual({ ...b.gains, zero: -0.05, pole: expect.closeTo(-0.005, 15) })
    expect(a.leftoverAngle).toBeCloseTo(b.leftoverAngle, 14)
    expect(a.onLocus).toBe(false)
    const [one, other] = [openLoop(model, lag), openLoop(model, shape)]
    expect(one.numerator).toEqual(other.numerator)
    expect(one.denominator).toEqual(other.denominator.map(c => expect.closeTo(c, 15)))
  })
})

describe('a sensor', () => {
  const s: Complex = { re: -0.7, im: 1.3 }
  const sensor = { numerator: [2], denominator: [0.3, 1] }
  const model: LoopModel = { plant: { numerator: [2], denominator: [1, 3, 0] }, sensor, rateFeedback: 0.4 }

  it.each<[Controller, Gains]>([
    [{ form: 'gain', shape: { numerator: [1, 2], denominator: [1, 20] } }, { k: 7 }],
    [{ form: 'pd' }, { kp: 4, kd: 0.5 }],
    [{ form: 'pi' }, { kp: 4, ki: 1.5 }],
    [controllerOf({ pole: -1 }, 0.02), { kp: 4, ki: 1.5, kd: 0.5 }],
  ])('stands in the feedback path alone: %j', (controller, gains) => {
    const f = loopFunctions(model, controller, gains)
    const [g, h] = [evaluateAt(effectivePlant(model), s), evaluateAt(sensor, s)]
    const l = evaluateAt(f.loop, s)
    const c = divide(l, multiply(g, h))
    const onePlusL = add(one, l)
    expect(distance(evaluateAt(f.reference, s), divide(multiply(c, g), onePlusL))).toBeLessThan(1e-12)
    expect(distance(evaluateAt(f.effort, s), divide(c, onePlusL))).toBeLessThan(1e-11)
    expect(distance(evaluateAt(f.disturbance, s), divide(g, onePlusL))).toBeLessThan(1e-12)
    expect(distance(add(evaluateAt(f.error, s), evaluateAt(f.reference, s)), one)).toBeLessThan(1e-12)
  })

  it('of gain 2 halves the final value of a loop with an integrator', () => {
    const { readings } = solveDesign(model, { form: 'gain' }, { gains: { k: 1 } })
    expect(readings.finalValue).toBeCloseTo(0.5, 12)
    expect(readings.steadyStateErrorStep).toBeCloseTo(0.5, 12)
  })

  it.each<Controller>([{ form: 'pd' }, { form: 'pi' }, { form: 'rate' }, { form: 'lead', poleZeroRatio: 12 }, controllerOf({ integralToDerivativeRatio: 5 }, undefined)])(
    'is reckoned with when a point is placed: %j', (controller) => {
      const point = { re: -1.2, im: 1.6 }
      const { gains } = placeGains(model, controller, point)
      const closed = roots(loopFunctions(model, controller, gains).characteristic)
      expect(Math.min(...closed.map(root => distance(root, point)))).toBeLessThan(1e-9)
    })
})
