/** What holds for every response of a linear loop, whatever its roots. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { loopFunctions } from '#shared/control/controller'
import { NoAnswerError } from '#shared/control/errors'
import { respond } from '#shared/control/response/response'
import { solveDesign } from '#shared/control/solve'
import type { DesignSolution, LoopModel, ResponseInput, TransferFunction } from '#shared/control/types'
import { add, fromRoots, multiply } from '#shared/numerics/polynomial'
import { roots } from '#shared/numerics/roots'
import { arbitraryLoop, arbitraryStable, loopGain } from '../helpers/arbitrary-loop'
import { holds } from '../helpers/property'

/** The step response at t = 0, h, 2h, ... by the classical Runge-Kutta method on the controllable form: another way than the sum over roots. */
function integrateStep({ numerator, denominator }: TransferFunction, step: number, count: number): number[] {
  const lead = denominator[0]!
  const order = denominator.length - 1
  const a = denominator.slice(1).map(coefficient => coefficient / lead)
  const padded = [...new Array<number>(order + 1 - numerator.length).fill(0), ...numerator].map(coefficient => coefficient / lead)
  const direct = padded[0]!
  const c = a.map((coefficient, n) => padded[n + 1]! - direct * coefficient)
  const slope = (x: number[]) => x.map((_, n) => n === 0 ? 1 - a.reduce((sum, coefficient, m) => sum + coefficient * x[m]!, 0) : x[n - 1]!)
  const moved = (x: number[], k: number[], h: number) => x.map((value, n) => value + h * k[n]!)
  let x = new Array<number>(order).fill(0)
  const output: number[] = []
  for (let n = 0; n < count; n += 1) {
    output.push(direct + c.reduce((sum, coefficient, m) => sum + coefficient * x[m]!, 0))
    const k1 = slope(x)
    const k2 = slope(moved(x, k1, step / 2))
    const k3 = slope(moved(x, k2, step / 2))
    const k4 = slope(moved(x, k3, step))
    x = x.map((value, m) => value + step / 6 * (k1[m]! + 2 * k2[m]! + 2 * k3[m]! + k4[m]!))
  }
  return output
}

/** null for an algebraic loop, which is refused. */
function solved(plant: TransferFunction, k: number, input: ResponseInput = 'reference-step', options = {}): DesignSolution | null {
  try {
    return solveDesign({ plant, rateFeedback: 0 }, { form: 'gain' }, { gains: { k } }, { response: { input, ...options } })
  }
  catch (error) {
    expect(error).toBeInstanceOf(NoAnswerError)
    return null
  }
}

const largest = (values: readonly number[]) => Math.max(...values.map(Math.abs))

/** The largest difference between two curves against the larger of both. */
function apart(a: readonly number[], b: readonly number[]): number {
  return largest(a.map((value, n) => value - b[n]!)) / Math.max(largest(a), largest(b), 1e-300)
}

describe('the response of a loop', () => {
  it('agrees with an integration step by step', () => {
    let compared = 0
    holds(20261, 400, [arbitraryLoop(2, 7), loopGain], (plant, k) => {
      const steps = 40
      const count = 26
      const solution = solved(plant, k, 'reference-step', { samples: count })
      if (!solution?.stable) return
      const { time, output } = solution.response
      const step = time.at(-1)! / (count - 1) / steps
      const fastest = Math.max(...solution.closedLoopPoles.map(({ re, im }) => Math.hypot(re, im)))
      // The fourth-order method is off by about (step · fastest)^4 of the size: only where that is small it can judge.
      if (step * fastest > 0.05) return
      const model: LoopModel = { plant, rateFeedback: 0 }
      const expected = integrateStep(loopFunctions(model, { form: 'gain' }, { k }).reference, step, (count - 1) * steps + 1).filter((_, n) => n % steps === 0)
      expect(largest(output.map((value, n) => value - expected[n]!)) / Math.max(1, largest(expected))).toBeLessThan(1e-6)
      compared += 1
    })
    expect(compared).toBeGreaterThan(60)
  })

  it('to a sum of inputs is the sum of the responses, in output and effort, stable or not', () => {
    const amplitude = fc.integer({ min: -50, max: 50 }).map(n => n / 10)
    holds(3, 150, [arbitraryLoop(1, 6), loopGain, amplitude, amplitude, fc.constantFrom<ResponseInput>('reference-step', 'reference-ramp', 'disturbance-step')], (plant, k, a, b, input) => {
      const duration = 5
      const curves = [a, b, a + b].map(amplitude => solved(plant, k, input, { amplitude, duration, samples: 41 })?.response)
      fc.pre(curves.every(curve => curve !== undefined))
      const [first, second, both] = curves.map(curve => curve!)
      for (const signal of ['output', 'effort'] as const) {
        const sum = first![signal].map((value, n) => value + second![signal][n]!)
        const size = Math.max(largest(first![signal]), largest(second![signal]), 1e-300)
        expect(largest(sum.map((value, n) => value - both![signal][n]!)) / size).toBeLessThan(1e-14)
      }
    })
  })
})

describe('the step response of a sum of transfer functions', () => {
  it('is the sum of their step responses, whatever roots the sum has in common or nearly so', () => {
    holds(4, 300, [arbitraryStable(1, 4), arbitraryStable(1, 4)], (g, h) => {
      const sum = { numerator: add(multiply(g.numerator, h.denominator), multiply(h.numerator, g.denominator)), denominator: fromRoots([...g.poles, ...h.poles]) }
      const [dt, count] = [0.25, 60]
      const sample = ({ numerator, denominator }: TransferFunction) => respond({ numerator, denominator }, roots(denominator), 1).sample(dt, count)
      const [ofSum, ofG, ofH] = [sample(sum), sample(g), sample(h)]
      expect(apart(ofSum, ofG.map((value, n) => value + ofH[n]!))).toBeLessThan(1e-9)
    })
  })

  it('is the slope of their ramp response', () => {
    holds(5, 200, [arbitraryStable(1, 6)], (g) => {
      const poles = roots(g.denominator)
      const [step, ramp] = [respond(g, poles, 1), respond(g, poles, 2)]
      const times = Array.from({ length: 20 }, (_, n) => 0.3 * (n + 1))
      const level = (t: number) => step.remains[0]! + step.transient(t)
      const rising = (t: number) => (ramp.remains[1] ?? 0) + ramp.slope(t)
      expect(apart(times.map(level), times.map(rising))).toBeLessThan(1e-9)
    })
  })
})
