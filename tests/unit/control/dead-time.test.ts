import { describe, expect, it } from 'vitest'
import { analyzeLoop } from '#shared/control/analyze'
import { closeLoop } from '#shared/control/closed-loop'
import { delayFactor, evaluateQuasi } from '#shared/control/delay/quasi-polynomial'
import { solveDesign } from '#shared/control/solve'
import type { Controller, LoopModel } from '#shared/control/types'
import { polynomialAt } from '#shared/control/response/trajectory'
import { abs, arg, divide, multiply, type Complex } from '#shared/numerics/complex'
import { evaluateComplex, fromRoots, scale } from '#shared/numerics/polynomial'
import { seededRandom } from '../../helpers/random'

const gainForm: Controller = { form: 'gain' }
const integrator = (deadTime: number): LoopModel => ({ plant: { numerator: [1], denominator: [1, 0] }, rateFeedback: 0, deadTime })

/** A loop as motion axes have them: poles over a decade or so, an integrator now and then, a dead time of a tenth to three times the slowest. */
function randomAxis(random: () => number): LoopModel {
  const poles: Complex[] = random() < 0.5 ? [{ re: 0, im: 0 }] : [{ re: -0.2 - random(), im: 0 }]
  const count = 1 + Math.floor(3 * random())
  for (let i = 0; i < count; i++) {
    if (random() < 0.4) {
      const size = 1 + 6 * random()
      const damping = 0.1 + 0.8 * random()
      const im = size * Math.sqrt(1 - damping * damping)
      poles.push({ re: -damping * size, im }, { re: -damping * size, im: -im })
    }
    else poles.push({ re: -0.5 - 6 * random(), im: 0 })
  }
  const denominator = fromRoots(poles)
  const gain = denominator.reduce((last, c) => c === 0 ? last : c, 1)
  return { plant: { numerator: [gain], denominator }, rateFeedback: 0, deadTime: 0.05 * 20 ** random() }
}

describe('a loop with dead time', () => {
  it('answers a step as the method of steps says in closed form', () => {
    // e' = -k e(t - T), e = 1 up to T: e(t) = sum (-k)^n (t - n T)^n/n! (R. Bellman, K. L. Cooke, "Differential-Difference Equations", 1963).
    for (const [k, T] of [[0.3, 1], [0.5, 2], [1.2, 0.8], [1e-3, 200], [40, 0.02]] as const) {
      const output = closeLoop(integrator(T), gainForm, { k }).respondTo('reference-step', 1).output
      for (let i = 1; i < 160; i++) {
        const t = i * T / 8.3
        let error = 0
        let term = 1
        for (let n = 0; n * T <= t; n++) {
          term = (-k) ** n
          for (let m = 1; m <= n; m++) term *= (t - n * T) / m
          error += term
        }
        expect(polynomialAt(output.remains, t) + output.transient(t)).toBeCloseTo(1 - error, 9)
      }
    }
  })

  it('puts a root exactly at the design point, in every form', () => {
    const plant = { numerator: [2], denominator: [1, 3, 2, 0] }
    const model: LoopModel = { plant, rateFeedback: 0, deadTime: 0.15, sensor: { numerator: [1], denominator: [0.01, 1] } }
    const forms: Controller[] = [
      { form: 'pd' }, { form: 'pi' }, { form: 'rate' }, { form: 'lead', poleZeroRatio: 12 }, { form: 'pd', derivativeFilter: 0.05 },
      { form: 'pid', third: { integralToDerivativeRatio: 5 } }, { form: 'pid', derivativeFilter: 0.02, third: { pole: -0.3 } },
    ]
    for (const form of forms) {
      for (const point of [{ re: -0.4, im: 0.5 }, { re: -0.35, im: 0 }]) {
        if (point.im === 0 && form.form === 'lead') continue
        const closed = closeLoop(model, form, solveDesign(model, form, { designPoint: point }).gains)
        const { value, size } = evaluateQuasi({ ...closed.functions.loop, deadTime: 0.15 }, point)
        expect(abs(value) / size).toBeLessThan(1e-12)
      }
    }
    const single = solveDesign(model, gainForm, { designPoint: { re: -0.3, im: 0.4 } })
    const s = { re: -0.3, im: 0.4 }
    const loop = multiply(divide(evaluateComplex([2], s), evaluateComplex([1, 3, 2, 0], s)), multiply(delayFactor(s, 0.15), divide({ re: 1, im: 0 }, evaluateComplex([0.01, 1], s))))
    expect((single.gains as { k: number }).k).toBeCloseTo(1 / abs(loop), 12)
    expect(single.leftoverAngleDeg).toBeCloseTo((arg(loop) * 180 / Math.PI - 180 + 540) % 360 - 180, 9)
  })

  it('finds every root of a region: as many as the argument principle counts', () => {
    const random = seededRandom(41)
    for (let round = 0; round < 60; round++) {
      const model = randomAxis(random)
      const { functions, poles } = closeLoop(model, gainForm, { k: 0.05 * 40 ** random() })
      const q = { ...functions.loop, deadTime: model.deadTime! }
      const box = { left: -3 / q.deadTime, right: 12, top: 7 * Math.PI / q.deadTime }
      const inside = poles.filter(({ re, im }) => re > box.left && re < box.right && Math.abs(im) < box.top).length
      expect(inside).toBe(countZeros(s => evaluateQuasi(q, s).value, box))
    }
  })

  it('is stable exactly where the winding number says so', () => {
    const random = seededRandom(42)
    let unstable = 0
    for (let round = 0; round < 80; round++) {
      const model = randomAxis(random)
      const closed = closeLoop(model, gainForm, { k: 0.2 * 30 ** random() })
      const q = { ...closed.functions.loop, deadTime: model.deadTime! }
      const right = countZeros(s => evaluateQuasi(q, s).value, { left: 0, right: 60, top: 200 })
      expect(closed.stable).toBe(right === 0)
      unstable += Number(!closed.stable)
    }
    expect(unstable).toBeGreaterThan(15)
    expect(unstable).toBeLessThan(65)
  })

  it('has the step figures of a fixed-step integration with a buffer for the delay', () => {
    const random = seededRandom(43)
    let judged = 0
    for (let round = 0; round < 40 && judged < 12; round++) {
      const model = randomAxis(random)
      const k = 0.05 * 20 ** random()
      const solution = solveDesign(model, gainForm, { gains: { k } })
      if (!solution.stable || solution.readings.settlingTime! > 60 * model.deadTime!) continue
      judged++
      const { overshoot, settling, rise } = integrate(model, k, 2 * solution.readings.settlingTime!)
      expect(solution.readings.overshootPercent!).toBeCloseTo(overshoot, 3)
      expect(Math.abs(solution.readings.settlingTime! - settling) / settling).toBeLessThan(2e-3)
      expect(Math.abs(solution.readings.riseTime! - rise) / rise).toBeLessThan(2e-3)
    }
    expect(judged).toBe(12)
  })

  it('has margins that agree with a dense sweep, and a delay margin that ends its stability', () => {
    const random = seededRandom(44)
    let judged = 0
    for (let round = 0; round < 60; round++) {
      const model = randomAxis(random)
      const k = 0.1 * 20 ** random()
      const { readings, stable } = solveDesign(model, gainForm, { gains: { k } })
      const { functions } = closeLoop(model, gainForm, { k })
      const at = (w: number) => multiply(divide(evaluateComplex(functions.loop.numerator, { re: 0, im: w }), evaluateComplex(functions.loop.denominator, { re: 0, im: w })), delayFactor({ re: 0, im: w }, model.deadTime!))
      let peak = 0
      for (let w = 1e-3; w < 200; w *= 1.0005) {
        const { re, im } = at(w)
        peak = Math.max(peak, 1 / Math.hypot(1 + re, im))
      }
      expect(Math.abs(readings.sensitivityPeak! / peak - 1)).toBeLessThan(1e-5)
      if (readings.gainCrossover !== null) {
        const there = at(readings.gainCrossover)
        expect(abs(there)).toBeCloseTo(1, 10)
        expect(Math.cos((readings.phaseMarginDeg! - 180) * Math.PI / 180)).toBeCloseTo(there.re, 9)
      }
      if (!stable) continue
      judged++
      const upper = readings.gainMargin.upper!
      expect(closeLoop(model, gainForm, { k: k * upper * (1 - 1e-6) }).stable).toBe(true)
      expect(closeLoop(model, gainForm, { k: k * upper * (1 + 1e-6) }).stable).toBe(false)
      if (readings.delayMargin === null) continue
      expect(closeLoop({ ...model, deadTime: model.deadTime! + readings.delayMargin * (1 - 1e-6) }, gainForm, { k }).stable).toBe(true)
      expect(closeLoop({ ...model, deadTime: model.deadTime! + readings.delayMargin * (1 + 1e-6) }, gainForm, { k }).stable).toBe(false)
    }
    expect(judged).toBeGreaterThan(20)
  })

  it('has a locus whose every point is a root of its gain, and meetings that lie on their ray', () => {
    const random = seededRandom(45)
    for (let round = 0; round < 25; round++) {
      const model = randomAxis(random)
      const analysis = analyzeLoop(model, gainForm, { dampingRatio: 0.6 })
      const { numerator, denominator, deadTime } = analysis.openLoop
      expect(deadTime).toBe(model.deadTime)
      expect(analysis.asymptotes).toBeNull()
      for (const { points } of analysis.branches) {
        for (const [re, im, gain] of points) {
          const { value, size } = evaluateQuasi({ numerator: scale(numerator, gain || 1e-300), denominator, deadTime }, { re, im })
          if (gain > 0) expect(abs(value)).toBeLessThan(1e-6 * size)
        }
        for (let i = 1; i < points.length; i++) expect(points[i]![2]).toBeGreaterThanOrEqual(points[i - 1]![2])
      }
      for (const { point, gain } of analysis.rayIntersections!) {
        expect(-point.re / abs(point)).toBeCloseTo(0.6, 12)
        const { value, size } = evaluateQuasi({ numerator: scale(numerator, gain), denominator, deadTime }, point)
        expect(abs(value)).toBeLessThan(1e-10 * size)
      }
      for (const [from, to] of analysis.stableGain) {
        if (to !== null) expect(closeLoop(model, gainForm, { k: to * (1 - 1e-7) }).stable).toBe(true)
        if (to !== null) expect(closeLoop(model, gainForm, { k: to * (1 + 1e-7) }).stable).toBe(false)
        if (from > 0) expect(closeLoop(model, gainForm, { k: from * (1 + 1e-7) }).stable).toBe(true)
      }
    }
  })

  it('leaves steady-state errors of unity feedback as they are, and those beside a sensor later by the dead time', () => {
    const plant = { numerator: [3], denominator: [1, 2, 0] }
    const plain = closeLoop({ plant, rateFeedback: 0, deadTime: 0.1 }, gainForm, { k: 2 })
    expect(plain.stationaryError(1)).toBe(0)
    // 1/Kv, Kv = lim s L(s) = 3.
    expect(plain.stationaryError(2)).toBeCloseTo(1 / 3, 12)
    expect(plain.stationaryError(3)).toBeNull()
    const steady = closeLoop({ plant: { numerator: [1], denominator: [1, 1] }, rateFeedback: 0, deadTime: 0.3 }, gainForm, { k: 1.5 })
    expect(steady.stationaryError(1)).toBeCloseTo(1 / 2.5, 12)
  })

  it('counts a pair that leaves the axis to the left as stable', () => {
    // s^2 + 1 - 0.5 e^(-0.3 s): feedback of the output, late, damps the pair (positive feedback here).
    const closed = closeLoop({ plant: { numerator: [-0.5], denominator: [1, 0, 1] }, rateFeedback: 0, deadTime: 0.3 }, gainForm, { k: 1 })
    expect(Math.max(...closed.poles.map(pole => pole.re))).toBeLessThan(-0.05)
    expect(closed.stable).toBe(true)
  })

  it('refuses what it cannot follow, and tends to the loop without dead time', () => {
    const model = (deadTime: number): LoopModel => ({ plant: { numerator: [4], denominator: [1, 3, 0] }, rateFeedback: 0, deadTime })
    const without = solveDesign({ ...model(0) }, gainForm, { gains: { k: 1.7 } }).readings
    const short = solveDesign(model(1e-7), gainForm, { gains: { k: 1.7 } }).readings
    expect(short.overshootPercent!).toBeCloseTo(without.overshootPercent!, 4)
    expect(short.settlingTime!).toBeCloseTo(without.settlingTime!, 5)
    expect(short.phaseMarginDeg!).toBeCloseTo(without.phaseMarginDeg!, 4)
    // L -> 2 e^(-sT) at high frequency: the chain of the delay's roots lies on the right.
    expect(closeLoop({ plant: { numerator: [1, 1], denominator: [1, 2] }, rateFeedback: 0, deadTime: 0.1 }, gainForm, { k: 2 }).stable).toBe(false)
    expect(() => solveDesign({ plant: { numerator: [1], denominator: [1, 1] }, rateFeedback: 0, deadTime: 0.1 }, { form: 'pd' }, { gains: { kp: 0.2, kd: 0.3 } })).toThrow(/filter/)
  })
})

/** Zeros of f in a box about the real axis, by the turn of its angle along the border. */
function countZeros(f: (s: Complex) => Complex, { left, right, top }: { left: number, right: number, top: number }): number {
  const corners = [{ re: left, im: -top }, { re: right, im: -top }, { re: right, im: top }, { re: left, im: top }, { re: left, im: -top }]
  let turned = 0
  for (let side = 0; side < 4; side++) {
    const [a, b] = [corners[side]!, corners[side + 1]!]
    let before = arg(f(a))
    for (let i = 1; i <= 6000; i++) {
      const here = arg(f({ re: a.re + (b.re - a.re) * i / 6000, im: a.im + (b.im - a.im) * i / 6000 }))
      let step = here - before
      if (step > Math.PI) step -= 2 * Math.PI
      if (step < -Math.PI) step += 2 * Math.PI
      turned += step
      before = here
    }
  }
  return Math.round(turned / 2 / Math.PI)
}

/** The step response by the classical Runge-Kutta formula in companion form; the delayed error by linear interpolation in a buffer. Its figures, from the grid. */
function integrate({ plant, deadTime }: LoopModel, k: number, end: number): { overshoot: number, settling: number, rise: number } {
  const lead = plant.denominator[0]!
  const a = plant.denominator.slice(1).map(c => c / lead)
  const gain = plant.numerator[0]! / lead
  const perDelay = Math.ceil(3000 * Math.min(1, 10 * deadTime! / end) + 200)
  const h = deadTime! / perDelay
  const n = a.length
  let x = new Float64Array(n)
  const y: number[] = [0]
  const slope = (state: Float64Array, u: number) => {
    const out = new Float64Array(n)
    for (let i = 0; i + 1 < n; i++) out[i] = state[i + 1]!
    out[n - 1] = u - a.reduce((sum, c, i) => sum + c * state[n - 1 - i]!, 0)
    return out
  }
  const step = (state: Float64Array, d: Float64Array, f: number) => state.map((value, i) => value + f * d[i]!)
  const errorAt = (position: number) => {
    if (position < 0) return 0
    const i = Math.min(Math.floor(position), y.length - 1)
    const next = y[Math.min(i + 1, y.length - 1)]!
    return 1 - (y[i]! + (position - i) * (next - y[i]!))
  }
  for (let i = 0; i * h < end; i++) {
    const u = [i - perDelay, i + 0.5 - perDelay, i + 1 - perDelay].map(position => k * errorAt(position))
    const k1 = slope(x, u[0]!)
    const k2 = slope(step(x, k1, h / 2), u[1]!)
    const k3 = slope(step(x, k2, h / 2), u[1]!)
    const k4 = slope(step(x, k3, h), u[2]!)
    x = x.map((value, j) => value + h / 6 * (k1[j]! + 2 * k2[j]! + 2 * k3[j]! + k4[j]!))
    y.push(gain * x[0]!)
  }
  const last = plant.denominator.at(-1)!
  const final = last === 0 ? 1 : k * plant.numerator[0]! / last / (1 + k * plant.numerator[0]! / last)
  const peak = Math.max(...y.map(value => value))
  const outside = y.findLastIndex(value => Math.abs(value - final) > 0.02 * final)
  const first = (level: number) => y.findIndex(value => value >= level * final)
  return { overshoot: Math.max(0, 100 * (peak / final - 1)), settling: outside * h, rise: (first(0.9) - first(0.1)) * h }
}
