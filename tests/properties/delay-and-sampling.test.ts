/**
 * Loops with dead time and sampled loops, whatever their plant. The method of steps: R. Bellman, K. L. Cooke, "Differential-Difference Equations" (1963).
 */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { closeLoop, type ClosedLoop } from '#shared/control/closed-loop'
import { evaluateQuasi } from '#shared/control/delay/quasi-polynomial'
import { polynomialAt, type Trajectory } from '#shared/control/response/trajectory'
import { solveDesign } from '#shared/control/solve'
import type { LoopModel, TransferFunction } from '#shared/control/types'
import { abs } from '#shared/numerics/complex'
import { arbitraryPoint, arbitraryStable, loopGain } from '../helpers/arbitrary-loop'
import { holds } from '../helpers/property'

/** Of a plant whose gain at rest is made 1, so that any of them makes a loop. */
const arbitraryPlant = arbitraryStable(1, 4).map(({ numerator, denominator }): TransferFunction => {
  const atRest = denominator.at(-1)! / numerator.at(-1)!
  return Number.isFinite(atRest) ? { numerator: numerator.map(c => c * atRest), denominator } : { numerator: [denominator.at(-1)!], denominator }
})
/** 0.01 to 3, to three digits. */
const arbitraryTime = fc.integer({ min: -200, max: 47 }).map(n => Number((10 ** (n / 100)).toPrecision(3)))

const valueAt = ({ remains, transient }: Trajectory, t: number) => polynomialAt(remains, t) + transient(t)
const slowest = ({ poles }: ClosedLoop) => Math.max(...poles.map(({ re }) => re))

describe('a dead time', () => {
  it('leaves the response what it is until it has passed twice, and then what the loop without feedback does until then', () => {
    holds(71, 60, [arbitraryPlant, loopGain, arbitraryTime], (plant, k, deadTime) => {
      const closed = closeLoop({ plant, rateFeedback: 0, deadTime }, { form: 'gain' }, { k })
      fc.pre(closed.stable && slowest(closed) < -0.02)
      const { output } = closed.respondTo('reference-step', 1)
      // Nothing arrives before one dead time; up to the second the plant answers to a step of k that no feedback has reached.
      const open = closeLoop({ plant: { numerator: plant.numerator.map(c => c * k), denominator: plant.denominator }, sensor: { numerator: [1e-30], denominator: [1] }, rateFeedback: 0 }, { form: 'gain' }, { k: 1 })
      const free = open.respondTo('reference-step', 1).output
      for (const share of [0.1, 0.5, 0.95]) {
        expect(Math.abs(valueAt(output, share * deadTime))).toBeLessThan(1e-12)
        expect(valueAt(output, (1 + share) * deadTime)).toBeCloseTo(valueAt(free, share * deadTime), 8)
      }
    })
  })

  it('keeps the design point a root, and its answer an answer of the whole equation', () => {
    holds(72, 80, [arbitraryPlant, arbitraryPoint, arbitraryTime], (plant, designPoint, deadTime) => {
      fc.pre(-designPoint.re * deadTime < 20)
      const { gains } = solveDesign({ plant, rateFeedback: 0, deadTime }, { form: 'pi' }, { designPoint })
      const { functions } = closeLoop({ plant, rateFeedback: 0, deadTime }, { form: 'pi' }, gains)
      const { value, size } = evaluateQuasi({ ...functions.loop, deadTime }, designPoint)
      expect(abs(value)).toBeLessThan(1e-9 * size)
    })
  })

  it('is followed by steps and by roots alike: the output obeys y\' through the loop at every later time', () => {
    holds(73, 40, [loopGain, arbitraryTime], (k, deadTime) => {
      // y' + y = k (1 - y(t - T)), checked at any t by differences of the answer itself.
      const closed = closeLoop({ plant: { numerator: [1], denominator: [1, 1] }, rateFeedback: 0, deadTime }, { form: 'gain' }, { k })
      fc.pre(closed.stable)
      const { output } = closed.respondTo('reference-step', 1)
      for (const dead of [2.3, 5.7, 9.9, 10.1, 14.4, 31]) {
        const t = dead * deadTime
        expect(output.slope(t) + valueAt(output, t)).toBeCloseTo(k * (1 - valueAt(output, t - deadTime)), 7)
      }
    })
  })
})

describe('a sampled loop', () => {
  it('tends to the continuous one as the period shrinks', () => {
    holds(74, 40, [arbitraryPlant, loopGain], (plant, k) => {
      const model: LoopModel = { plant, rateFeedback: 0 }
      const continuous = closeLoop(model, { form: 'gain' }, { k })
      fc.pre(continuous.stable && slowest(continuous) < -0.05)
      const fastest = Math.max(...continuous.poles.map(abs))
      const exact = continuous.respondTo('reference-step', 1).output
      const off = (period: number) => {
        const sampled = closeLoop({ ...model, sampling: { period, computingDelay: false } }, { form: 'gain' }, { k })
        expect(sampled.stable).toBe(true)
        const { output } = sampled.respondTo('reference-step', 1)
        return Math.max(...[0.5, 1, 2, 4].map(n => Math.abs(valueAt(output, n / fastest) - valueAt(exact, n / fastest))))
      }
      const [coarse, fine] = [off(4e-3 / fastest), off(4e-4 / fastest)]
      expect(coarse).toBeLessThan(0.05)
      expect(fine).toBeLessThan(Math.max(coarse / 5, 1e-6))
    })
  })

  it('holds its output between samples, and reads the plant where the plant is', () => {
    holds(75, 40, [arbitraryPlant, loopGain, arbitraryTime], (plant, k, period) => {
      const closed = closeLoop({ plant, rateFeedback: 0, sampling: { period, computingDelay: false } }, { form: 'gain' }, { k })
      fc.pre(closed.stable && slowest(closed) * period < -0.02)
      const { output, effort } = closed.respondTo('reference-step', 1)
      for (const n of [0, 1, 3, 10]) {
        expect(valueAt(effort, (n + 0.3) * period)).toBeCloseTo(valueAt(effort, (n + 0.9) * period), 9)
        expect(valueAt(effort, (n + 0.5) * period)).toBeCloseTo(k * (1 - valueAt(output, n * period)), 8)
      }
    })
  })
})
