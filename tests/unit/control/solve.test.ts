import { describe, expect, it } from 'vitest'
import { InvalidInputError, NoAnswerError } from '#shared/control/errors'
import { solveDesign } from '#shared/control/solve'
import type { LoopModel } from '#shared/control/types'
import { distance } from '#shared/numerics/complex'

const servo: LoopModel = { plant: { numerator: [2], denominator: [1, 3, 0] }, rateFeedback: 0 }

describe('a design', () => {
  it('reaches the wanted point with two gains, and shows it among its roots', () => {
    const solution = solveDesign(servo, { form: 'pd' }, { designPoint: { re: -4, im: 3 } })
    // s² + (3 + 2 kd) s + 2 kp = (s + 4)² + 9
    expect(solution.gains).toEqual({ kp: expect.closeTo(12.5, 12), kd: expect.closeTo(2.5, 12) })
    expect(solution.onLocus).toBe(true)
    expect(Math.min(...solution.closedLoopPoles.map(pole => distance(pole, { re: -4, im: 3 })))).toBeLessThan(1e-12)
    expect(solution.designPoint).toMatchObject({ dampingRatio: expect.closeTo(0.8, 14), naturalFrequency: expect.closeTo(5, 14) })
    // Settling by the rule of thumb, 4/σ, stands beside what the whole loop does.
    expect(solution.estimate.settlingTime).toBeCloseTo(1, 14)
    expect(solution.readings.settlingTime).not.toBeNull()
  })

  it('takes the gains as they are, and names the dominant root then', () => {
    const solution = solveDesign(servo, { form: 'gain' }, { gains: { k: 5 } })
    expect(solution.designPoint).toMatchObject({ re: expect.closeTo(-1.5, 12), im: expect.closeTo(Math.sqrt(7.75), 12) })
    expect(solution.leftoverAngleDeg).toBe(0)
    expect(solution.alternatives).toEqual([])
  })

  it('answers for an unstable loop, without the readings that need rest', () => {
    const solution = solveDesign({ plant: { numerator: [1], denominator: [1, 3, 2, 0] }, rateFeedback: 0 }, { form: 'gain' }, { gains: { k: 60 } })
    expect(solution.stable).toBe(false)
    const { finalValue, overshootPercent, settlingTime, peakTime, riseTime } = solution.readings
    expect({ finalValue, overshootPercent, settlingTime, peakTime, riseTime }).toEqual({
      finalValue: null, overshootPercent: null, settlingTime: null, peakTime: null, riseTime: null,
    })
    expect(solution.response.output.every(Number.isFinite)).toBe(true)
  })

  it('takes a gain that only rounding parts from 0 for 0', () => {
    // On the locus of the one gain: s² + 3 s + 2 k at damping ratio 0.6 is reached without a derivative part.
    const point = { re: -1.5, im: 2 }
    expect(solveDesign(servo, { form: 'pd' }, { designPoint: point }).gains).toEqual({ kp: expect.closeTo(3.125, 12), kd: 0 })
    expect(solveDesign(servo, { form: 'rate' }, { designPoint: point }).gains).toEqual({ kp: expect.closeTo(3.125, 12), kr: 0 })
    expect(solveDesign(servo, { form: 'pi' }, { designPoint: point }).gains).toEqual({ kp: expect.closeTo(3.125, 12), ki: 0 })
  })

  it('looks at a lasting oscillation for ten of its cycles', () => {
    // s³ + 3 s² + 2 s + k: at k = 6 a pair lies on the axis at sqrt(2); a little below, as near to it as rounding can tell.
    const plant = { numerator: [1], denominator: [1, 3, 2, 0] }
    for (const k of [6, 5.9999999999994]) {
      const { stable, response } = solveDesign({ plant, rateFeedback: 0 }, { form: 'gain' }, { gains: { k } })
      expect(stable).toBe(false)
      expect(response.time.at(-1)).toBe(50)
    }
  })

  it('counts what is not met', () => {
    const requirements = [
      { reading: 'overshootPercent', limit: 'at-most', value: 1 }, { reading: 'settlingTime', limit: 'at-most', value: 60 },
    ] as const
    const { verdicts, unmet } = solveDesign(servo, { form: 'gain' }, { gains: { k: 5 } }, { requirements })
    expect(verdicts.map(({ met }) => met)).toEqual([false, true])
    expect(unmet).toBe(1)
  })

  it('refuses points and gains that are none, naming the field', () => {
    const refused = (act: () => unknown) => {
      try {
        act()
      } catch (error) {
        return error instanceof InvalidInputError ? error.path : error
      }
      return 'accepted'
    }
    expect(refused(() => solveDesign(servo, { form: 'gain' }, { designPoint: { re: -1, im: -1 } }))).toBe('designPoint.im')
    expect(refused(() => solveDesign(servo, { form: 'gain' }, { designPoint: { re: NaN, im: 1 } }))).toBe('designPoint')
    expect(refused(() => solveDesign(servo, { form: 'gain' }, { gains: { k: Infinity } }))).toBe('gains')
  })

  it('answers coefficients over two hundred decades by a number or by a reason, never by something that is no number', () => {
    const plant = { numerator: [2, -2.8e80, 1.6e44], denominator: [-5, -1.4e33, 0, 3.4e-21, -4.4e62] }
    const design = () => solveDesign({ plant, rateFeedback: 0 }, { form: 'pd' }, { designPoint: { re: -1, im: 1 } })
    try {
      const { response, closedLoopPoles } = design()
      expect([...response.output, ...response.effort, ...closedLoopPoles.flatMap(({ re, im }) => [re, im])].every(Number.isFinite)).toBe(true)
    } catch (error) {
      expect(error).toBeInstanceOf(NoAnswerError)
    }
  })
})
