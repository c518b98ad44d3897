import { describe, expect, it } from 'vitest'
import { closeLoop } from '#shared/control/closed-loop'
import { polynomialAt } from '#shared/control/response/trajectory'
import { solveDesign } from '#shared/control/solve'
import type { Controller, Gains, LoopModel } from '#shared/control/types'
import { seededRandom } from '../../helpers/random'

const gainForm: Controller = { form: 'gain' }
const mass = { numerator: [1], denominator: [1, 0, 0] }

describe('a loop with a limit on the controller output', () => {
  it('moves a mass under full push as Newton says, until the controller leaves the limit', () => {
    // 1/s^2 with rate feedback, kp = 4, kr = 4, limit 1: u = 4 - 4 t^2/2 - 4 t > 1 at first, y = t^2/2 until u = 1.
    const model: LoopModel = { plant: mass, rateFeedback: 0, actuatorLimit: 1 }
    const { output, effort, limitedUntil } = closeLoop(model, { form: 'rate' }, { kp: 4, kr: 4 }).respondTo('reference-step', 1)
    const leaves = (-4 + Math.sqrt(16 + 4 * 2 * 3)) / 4
    for (const t of [0.1, 0.3, leaves]) {
      expect(polynomialAt(output.remains, t) + output.transient(t)).toBeCloseTo(t * t / 2, 12)
      expect(effort.remains[0]! + effort.transient(t * (1 - 1e-9))).toBeCloseTo(1, 8)
    }
    expect(effort.remains[0]! + effort.transient(leaves + 0.05)).toBeLessThan(1)
    expect(limitedUntil).toBeGreaterThanOrEqual(leaves)
    const { readings, response } = solveDesign(model, { form: 'rate' }, { gains: { kp: 4, kr: 4 } })
    expect(readings.peakEffort).toBeCloseTo(1, 12)
    expect(readings.finalValue).toBe(1)
    expect(response.limitedUntil).toBe(limitedUntil)
  })

  it('is the linear loop while the limit is not reached', () => {
    const plant = { numerator: [1], denominator: [1, 1, 0] }
    const free = solveDesign({ plant, rateFeedback: 0 }, gainForm, { gains: { k: 0.5 } })
    const limited = solveDesign({ plant, rateFeedback: 0, actuatorLimit: 0.6 }, gainForm, { gains: { k: 0.5 } })
    expect(limited.readings).toEqual(free.readings)
    expect(limited.response.limitedUntil).toBe(0)
    expect(free.response).not.toHaveProperty('limitedUntil')
  })

  it('scales with the height of the step: twice the step against twice the limit is the same movement', () => {
    const model = (actuatorLimit: number): LoopModel => ({ plant: { numerator: [2], denominator: [1, 1.5, 0] }, rateFeedback: 0, actuatorLimit })
    const one = solveDesign(model(0.7), gainForm, { gains: { k: 2 } }, { response: { amplitude: 1 } }).readings
    const two = solveDesign(model(1.4), gainForm, { gains: { k: 2 } }, { response: { amplitude: -2 } }).readings
    expect(two.overshootPercent).toBeCloseTo(one.overshootPercent!, 10)
    expect(two.settlingTime).toBeCloseTo(one.settlingTime!, 10)
    expect(two.peakEffort).toBeCloseTo(2 * one.peakEffort!, 10)
  })

  it('agrees with an integration in small steps: gain, PI, filtered PD, with and without dead time', () => {
    const random = seededRandom(91)
    const forms: [Controller, (r: () => number) => Gains][] = [
      [gainForm, r => ({ k: 1 + 3 * r() })], [{ form: 'pi' }, r => ({ kp: 1 + r(), ki: 0.2 + 0.5 * r() })], [{ form: 'pd', derivativeFilter: 0.1 }, r => ({ kp: 2 + 2 * r(), kd: 1 + r() })],
    ]
    let compared = 0
    for (let round = 0; round < 48; round++) {
      const [form, gainsOf] = forms[round % 3]!
      const gains = gainsOf(random)
      const a = [1, 1.5 + random(), 0.5 + random(), 0]
      const model: LoopModel = { plant: { numerator: [a[2]!], denominator: a }, rateFeedback: 0, deadTime: round % 2 ? 0.1 : 0, actuatorLimit: 0.3 + 0.7 * random() }
      const closed = closeLoop(model, form, gains)
      // On the border of stability it swings for longer than one answer may follow.
      if (Math.max(...closed.poles.map(pole => pole.re)) > -0.02) continue
      const { output } = closed.respondTo('reference-step', 1)
      if (!output.decays) continue
      compared++
      for (const { t, y } of integrate(model, gains)) expect(Math.abs(polynomialAt(output.remains, t) + output.transient(t) - y)).toBeLessThan(5e-5)
    }
    expect(compared).toBeGreaterThan(12)
  })

  it('has no figures of a step that the limit does not let arrive, and stays an answer when unstable', () => {
    const plant = { numerator: [1], denominator: [1, 1] }
    // Coming to rest at 10/11 asks for 10/11 of effort; the limit is half of that.
    const held = solveDesign({ plant, rateFeedback: 0, actuatorLimit: 0.5 }, gainForm, { gains: { k: 10 } })
    expect(held.readings.finalValue).toBeNull()
    expect(held.readings.overshootPercent).toBeNull()
    expect(held.response.limitedUntil).toBeNull()
    expect(held.response.output.at(-1)!).toBeLessThanOrEqual(0.5)
    const swinging = solveDesign({ plant: { numerator: [1], denominator: [1, 1, 1, 0] }, rateFeedback: 0, actuatorLimit: 0.5 }, gainForm, { gains: { k: 3 } }, { response: { duration: 60 } })
    expect(swinging.stable).toBe(false)
    expect(Math.max(...swinging.response.output.map(Math.abs))).toBeLessThan(10)
    expect(Math.max(...swinging.response.effort.map(Math.abs))).toBeLessThanOrEqual(0.5)
  })
})

/** The loop in companion form, with integral and filtered derivative as states, by the classical Runge-Kutta formula in steps of 1/4000 s. */
function integrate({ plant, deadTime = 0, actuatorLimit: limit = Infinity }: LoopModel, gains: Gains): { t: number, y: number }[] {
  const { k = 0, kp = k, ki = 0, kd = 0 } = gains as Record<string, number>
  const a = plant.denominator.slice(1)
  const n = a.length
  const h = 1 / 4000
  const delay = Math.round(deadTime / h)
  const wish = (x: number[]) => {
    const e = 1 - plant.numerator[0]! * x[0]!
    return kp * e + ki * x[n]! + kd * (e - x[n + 1]!) / 0.1
  }
  const clip = (u: number) => Math.max(-limit, Math.min(limit, u))
  const slope = (x: number[], u: number) => {
    const e = 1 - plant.numerator[0]! * x[0]!
    return [...a.map((_, i) => i + 1 < n ? x[i + 1]! : u - a.reduce((sum, c, j) => sum + c * x[n - 1 - j]!, 0)), e, (e - x[n + 1]!) / 0.1]
  }
  let x: number[] = new Array<number>(n + 2).fill(0)
  const u: number[] = []
  const at = (x: number[], position: number) => {
    if (delay === 0) return clip(wish(x))
    if (position < 0) return 0
    const i = Math.min(Math.floor(position), u.length - 1)
    return u[i]! + (position - i) * ((u[i + 1] ?? u[i]!) - u[i]!)
  }
  const witness: { t: number, y: number }[] = []
  for (let i = 0; i * h < 5; i++) {
    u.push(clip(wish(x)))
    const move = (d: number[], f: number) => x.map((value, j) => value + f * d[j]!)
    const k1 = slope(x, at(x, i - delay))
    const x2 = move(k1, h / 2)
    const k2 = slope(x2, at(x2, i + 0.5 - delay))
    const x3 = move(k2, h / 2)
    const k3 = slope(x3, at(x3, i + 0.5 - delay))
    const x4 = move(k3, h)
    const k4 = slope(x4, at(x4, i + 1 - delay))
    x = x.map((value, j) => value + h / 6 * (k1[j]! + 2 * k2[j]! + 2 * k3[j]! + k4[j]!))
    if (i % 499 === 0) witness.push({ t: (i + 1) * h, y: plant.numerator[0]! * x[0]! })
  }
  return witness
}

describe('a sampled loop with a limit', () => {
  it('never puts out more, though its slow roots swing into the limit again and again', () => {
    const random = seededRandom(17)
    let limited = 0
    for (let round = 0; round < 60; round++) {
      const plant = { numerator: [8], denominator: [8e-5, 0.0212, 0.1 + 0.3 * random(), 0] }
      const actuatorLimit = 0.02 + 0.4 * random()
      const model: LoopModel = { plant, rateFeedback: 0, actuatorLimit, sampling: { period: 0.002 + 0.03 * random(), computingDelay: random() < 0.5 } }
      const { response, readings, stable } = solveDesign(model, gainForm, { gains: { k: 0.1 + random() } })
      expect(Math.max(...response.effort.map(Math.abs))).toBeLessThanOrEqual(actuatorLimit * (1 + 1e-9))
      if (!stable || readings.peakEffort === null) continue
      expect(readings.peakEffort).toBeLessThanOrEqual(actuatorLimit * (1 + 1e-9))
      limited += Number(response.limitedUntil! > 0)
    }
    expect(limited).toBeGreaterThan(15)
  })
})
