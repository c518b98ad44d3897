import { describe, expect, it } from 'vitest'
import { closeLoop } from '#shared/control/closed-loop'
import { polynomialAt } from '#shared/control/response/trajectory'
import { sampledController } from '#shared/control/sampled/sampled-controller'
import { solveDesign } from '#shared/control/solve'
import type { Controller, Gains, LoopModel } from '#shared/control/types'
import { multiply, type Complex } from '#shared/numerics/complex'
import { evaluateComplex, fromRoots } from '#shared/numerics/polynomial'
import { roots } from '#shared/numerics/roots'
import { seededRandom } from '../../helpers/random'

const gainForm: Controller = { form: 'gain' }
const sampled = (plant: LoopModel['plant'], period: number, more: Partial<LoopModel> & { computingDelay?: boolean } = {}): LoopModel => {
  const { computingDelay = false, ...rest } = more
  return { plant, rateFeedback: 0, sampling: { period, computingDelay }, ...rest }
}
const servo = { numerator: [1], denominator: [1, 1, 0] }

describe('a sampled loop', () => {
  it('stands on the border of stability where the textbook has it: K. Ogata, "Discrete-Time Control Systems", 1/(s(s + 1)) with T = 1 s, K = 2.3925 (from memory)', () => {
    const stable = (k: number) => closeLoop(sampled(servo, 1), gainForm, { k }).stable
    // z^2 + (a K - 1 - e^-1) z + b K + e^-1 with a = e^-1, b = 1 - 2 e^-1; on the circle where b K + e^-1 = 1.
    const limit = (1 - Math.exp(-1)) / (1 - 2 * Math.exp(-1))
    expect(limit).toBeCloseTo(2.392, 3)
    expect(stable(limit * (1 - 1e-9))).toBe(true)
    expect(stable(limit * (1 + 1e-9))).toBe(false)
    const { readings } = solveDesign(sampled(servo, 1), gainForm, { gains: { k: 1 } })
    expect(readings.gainMargin.upper!).toBeCloseTo(limit, 9)
  })

  it('has the roots of the hold-equivalent: first order, and the second order above', () => {
    const h = 0.3
    const [pole] = closeLoop(sampled({ numerator: [1], denominator: [1, 1] }, h), gainForm, { k: 0.8 }).poles
    expect(pole!.re).toBeCloseTo(Math.log(Math.exp(-h) - 0.8 * (1 - Math.exp(-h))) / h, 11)
    const k = 0.7
    const e = Math.exp(-1)
    const expected = roots([1, k * e - 1 - e, k * (1 - 2 * e) + e])
    const found = closeLoop(sampled(servo, 1), gainForm, { k }).poles
    for (const z of expected) {
      const s = { re: Math.log(Math.hypot(z.re, z.im)), im: Math.atan2(z.im, z.re) }
      expect(Math.min(...found.map(p => Math.hypot(p.re - s.re, p.im - s.im)))).toBeLessThan(1e-11)
    }
    // One period of computing delay: one root more, z (z - e^-h) + k (1 - e^-h).
    const late = closeLoop(sampled({ numerator: [1], denominator: [1, 1] }, h, { computingDelay: true }), gainForm, { k: 0.8 }).poles
    const zs = roots([1, -Math.exp(-h), 0.8 * (1 - Math.exp(-h))])
    expect(late).toHaveLength(2)
    late.forEach(p => expect(Math.min(...zs.map(z => Math.abs(Math.exp(p.re * h) * Math.cos(p.im * h) - z.re) + Math.abs(Math.exp(p.re * h) * Math.sin(p.im * h) - z.im)))).toBeLessThan(1e-11))
  })

  it('computes shapes by the bilinear rule, published case G01: (11 s + 1)/(3 s + 1), T = 1 s becomes (23 z - 21)/(7 z - 5)', () => {
    const { matrix, onError, row, errorGain } = sampledController({ form: 'gain', shape: { numerator: [11, 1], denominator: [3, 1] } }, { k: 1 }, 1)
    expect(matrix[0]).toBeCloseTo(5 / 7, 14)
    expect(errorGain).toBeCloseTo(23 / 7, 14)
    expect(errorGain * matrix[0]! - onError[0]! * row[0]!).toBeCloseTo(21 / 7, 13)
    expect(() => sampledController({ form: 'gain', shape: { numerator: [1, 1, 0], denominator: [1, 2] } }, { k: 1 }, 1)).toThrow(/as many poles/)
  })

  it('computes a PID as difference equations say', () => {
    const [kp, ki, kd, filter, h] = [2, 3, 0.4, 0.05, 0.02]
    const law = sampledController({ form: 'pid', derivativeFilter: filter, third: { pole: -1 } }, { kp, ki, kd }, h)
    const random = seededRandom(5)
    let state = new Float64Array(law.row.length)
    let [integral, derivative, before] = [0, 0, 0]
    for (let k = 0; k < 50; k++) {
      const e = random() - 0.5
      integral += k === 0 ? ki * h / 2 * e : ki * h / 2 * (e + before)
      derivative = (filter * derivative + kd * (e - before)) / (filter + h)
      const u = law.row.reduce((sum, c, i) => sum + c * state[i]!, law.errorGain * e)
      expect(u).toBeCloseTo(kp * e + integral + derivative, 11)
      state = state.map((_, i) => law.onError[i]! * e + state.reduce((sum, c, j) => sum + law.matrix[i * state.length + j]! * c, 0))
      before = e
    }
  })

  it('answers as an integration of the plant with a held input does, between the samples too, with dead time, computing delay and limit', () => {
    const random = seededRandom(71)
    for (let round = 0; round < 12; round++) {
      const period = 0.05 + 0.1 * random()
      const plant = randomPlant(random)
      const deadTime = random() < 0.5 ? 0 : 0.3 * random()
      const computingDelay = random() < 0.5
      const limit = random() < 0.5 ? undefined : 0.4
      const k = 0.3 + 0.4 * random()
      const closed = closeLoop(sampled(plant, period, { deadTime, computingDelay, actuatorLimit: limit }), gainForm, { k })
      if (!closed.stable) continue
      const { output, effort } = closed.respondTo('reference-step', 1)
      const witness = integrate(plant, { period, delay: deadTime + (computingDelay ? period : 0), k, limit: limit ?? Infinity })
      for (const { t, y, u } of witness) {
        expect(polynomialAt(output.remains, t) + output.transient(t)).toBeCloseTo(y, 7)
        expect(polynomialAt(effort.remains, t) + effort.transient(t)).toBeCloseTo(u, 7)
      }
    }
  })

  it('tends to the continuous loop as the period shrinks, in every form', () => {
    const plant = { numerator: [4], denominator: [1, 3, 2, 0] }
    const cases: [Controller, Gains][] = [
      [gainForm, { k: 0.3 }], [{ form: 'pd', derivativeFilter: 0.05 }, { kp: 0.6, kd: 0.4 }], [{ form: 'pi' }, { kp: 0.2, ki: 0.02 }], [{ form: 'rate' }, { kp: 0.6, kr: 0.3 }],
      [{ form: 'lead', poleZeroRatio: 8 }, { k: 2, zero: -1, pole: -8 }], [{ form: 'lag', poleZeroRatio: 0.2, zero: -0.2 }, { k: 0.2, zero: -0.2, pole: -0.04 }],
      [{ form: 'pid', derivativeFilter: 0.05, third: { pole: -1 } }, { kp: 0.5, ki: 0.05, kd: 0.3 }], [{ form: 'gain', shape: { numerator: [1, 1], denominator: [1, 10] } }, { k: 3 }],
    ]
    for (const [form, gains] of cases) {
      const continuous = solveDesign({ plant, rateFeedback: 0 }, form, { gains }).readings
      const off = (period: number) => {
        const { overshootPercent, settlingTime, phaseMarginDeg, sensitivityPeak, bandwidth, gainMargin } = solveDesign(sampled(plant, period), form, { gains }).readings
        return [
          Math.abs(overshootPercent! - continuous.overshootPercent!), Math.abs(settlingTime! - continuous.settlingTime!), Math.abs(phaseMarginDeg! - continuous.phaseMarginDeg!),
          Math.abs(sensitivityPeak! - continuous.sensitivityPeak!), Math.abs(bandwidth! - continuous.bandwidth!), Math.abs(1 / gainMargin.upper! - 1 / (continuous.gainMargin.upper ?? Infinity)),
        ]
      }
      const [coarse, fine] = [off(0.02), off(0.002)]
      coarse.forEach((error, i) => {
        expect(error).toBeLessThan(2)
        // First order in the period, or below what matters already.
        expect(fine[i]!).toBeLessThan(Math.max(error / 7, 2e-4))
      })
    }
  })

  it('has margins that agree with the continuous loop with half a period of delay, and tell the border of its own stability', () => {
    const plant = { numerator: [30], denominator: [1, 8, 15, 0] }
    const { readings } = solveDesign(sampled(plant, 0.01), gainForm, { gains: { k: 0.5 } })
    const halfLate = solveDesign({ plant, rateFeedback: 0, deadTime: 0.005 }, gainForm, { gains: { k: 0.5 } }).readings
    expect(readings.phaseMarginDeg!).toBeCloseTo(halfLate.phaseMarginDeg!, 2)
    const upper = readings.gainMargin.upper! * 0.5
    expect(closeLoop(sampled(plant, 0.01), gainForm, { k: upper * (1 - 1e-8) }).stable).toBe(true)
    expect(closeLoop(sampled(plant, 0.01), gainForm, { k: upper * (1 + 1e-8) }).stable).toBe(false)
  })

  it('shows the continuous design beside the sampled one, and refuses what it cannot compute', () => {
    const solution = solveDesign(sampled(servo, 0.4), gainForm, { designPoint: { re: -0.5, im: 0.5 } })
    expect(solution.gains).toEqual({ k: expect.closeTo(0.5, 12) })
    expect(solution.continuous!.closedLoopPoles[0]!.re).toBeCloseTo(-0.5, 12)
    expect(solution.continuous!.readings.overshootPercent!).toBeCloseTo(100 * Math.exp(-Math.PI), 8)
    expect(solution.readings.overshootPercent!).toBeGreaterThan(solution.continuous!.readings.overshootPercent! + 1)
    expect(solution.closedLoopPoles[0]!.re).toBeGreaterThan(-0.5)
    expect(() => solveDesign(sampled(servo, 0.001, { deadTime: 1 }), gainForm, { gains: { k: 0.2 } })).toThrow(/sample periods/)
    expect(solveDesign(sampled(servo, 1e-5), gainForm, { gains: { k: 0.5 } }).readings.overshootPercent!).toBeCloseTo(100 * Math.exp(-Math.PI), 3)
    expect(() => solveDesign(sampled(servo, 1e-8), gainForm, { gains: { k: 0.5 } })).toThrow(/leave it out/)
  })
})

function randomPlant(random: () => number): LoopModel['plant'] {
  const poles: Complex[] = [{ re: random() < 0.5 ? 0 : -0.5, im: 0 }, { re: -1 - 20 * random(), im: 0 }]
  if (random() < 0.5) poles.push({ re: -2, im: 9 }, { re: -2, im: -9 })
  const denominator = fromRoots(poles)
  const size = multiply(evaluateComplex(denominator, { re: 0, im: 1 }), { re: 1, im: 0 })
  return { numerator: [Math.hypot(size.re, size.im)], denominator }
}

/** The plant in companion form by the classical Runge-Kutta formula with steps that end at every switch of the held input; the sampled law by hand. */
function integrate({ numerator, denominator }: LoopModel['plant'], { period, delay, k, limit }: { period: number, delay: number, k: number, limit: number }) {
  const a = denominator.slice(1)
  const n = a.length
  let x: number[] = new Array<number>(n).fill(0)
  const sent: { from: number, u: number }[] = []
  const witness: { t: number, y: number, u: number }[] = []
  const slope = (state: number[], u: number) => state.map((_, i) => i + 1 < n ? state[i + 1]! : u - a.reduce((sum, c, j) => sum + c * state[n - 1 - j]!, 0))
  const move = (state: number[], d: number[], f: number) => state.map((value, i) => value + f * d[i]!)
  for (let sample = 0; sample < 60; sample++) {
    const t0 = sample * period
    const u = Math.max(-limit, Math.min(limit, k * (1 - numerator[0]! * x[0]!)))
    sent.push({ from: t0 + delay, u })
    const cuts = [t0, t0 + 0.37 * period, ...sent.map(({ from }) => from).filter(from => from > t0 + 1e-12 && from < t0 + period - 1e-12), t0 + period].sort((p, q) => p - q)
    for (let c = 0; c + 1 < cuts.length; c++) {
      const middle = (cuts[c]! + cuts[c + 1]!) / 2
      const held = sent.filter(({ from }) => from <= middle).at(-1)?.u ?? 0
      const steps = 60
      const h = (cuts[c + 1]! - cuts[c]!) / steps
      for (let i = 0; i < steps; i++) {
        const k1 = slope(x, held)
        const k2 = slope(move(x, k1, h / 2), held)
        const k3 = slope(move(x, k2, h / 2), held)
        const k4 = slope(move(x, k3, h), held)
        x = x.map((value, j) => value + h / 6 * (k1[j]! + 2 * k2[j]! + 2 * k3[j]! + k4[j]!))
      }
      if (Math.abs(cuts[c + 1]! - t0 - 0.37 * period) < 1e-12) witness.push({ t: cuts[c + 1]!, y: numerator[0]! * x[0]!, u })
    }
  }
  return witness
}

describe('the effort of a sampled loop', () => {
  it('comes to rest where the loop does, long after the samples are no longer followed one by one', () => {
    const { response, readings } = solveDesign(sampled(servo, 0.001), gainForm, { gains: { k: 0.5 } }, { response: { duration: 40 } })
    expect(readings.peakEffort).toBeCloseTo(0.5, 12)
    expect(response.effort.at(-1)!).toBeCloseTo(0, 6)
    response.effort.forEach((u, i) => expect(u).toBeCloseTo(0.5 * (1 - response.output[i]!), 2))
    const pi = solveDesign(sampled({ numerator: [1], denominator: [1, 1] }, 0.001), { form: 'pi' }, { gains: { kp: 1, ki: 1 } }, { response: { duration: 40 } })
    expect(pi.response.effort.at(-1)!).toBeCloseTo(1, 6)
  })

  it('is followed to rest after a slew that lasted longer than any root', () => {
    const model = sampled({ numerator: [1], denominator: [1, 0] }, 0.002, { actuatorLimit: 0.04 })
    const { readings, response } = solveDesign(model, gainForm, { gains: { k: 1 } })
    // 1 - 0.04 t until 0.04 is left of the error, then e^-t: settled to 2 % at 24 + ln 2.
    expect(response.limitedUntil!).toBeCloseTo(24, 1)
    expect(readings.settlingTime!).toBeCloseTo(24 + Math.log(2), 2)
  })
})
