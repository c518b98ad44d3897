import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { closeLoop } from '#shared/control/closed-loop'
import { NoAnswerError } from '#shared/control/errors'
import { frequencyResponse, type FrequencyOptions } from '#shared/control/frequency/frequency-response'
import { sampleFrequencies, usualRange } from '#shared/control/frequency/sample-frequencies'
import { evaluateAt } from '#shared/control/transfer-function'
import type { Controller, Gains, LoopModel } from '#shared/control/types'
import { abs, add, arg, divide, one } from '#shared/numerics/complex'
import { findMaximum } from '#shared/numerics/find-maximum'
import { evaluateComplex } from '#shared/numerics/polynomial'
import { evaluateLoop, loopOf, product } from '../../helpers/loops'
import { expectClose } from '../../helpers/published'
import { arbitraryLoop } from '../../helpers/arbitrary-loop'

/** L, S and T of a unity-feedback loop with this loop transfer, at one frequency. */
function at(numerator: number[], denominator: number[], w: number, deadTime = 0) {
  const found = over(numerator, denominator, { from: w, to: 2 * w, samples: 20 }, deadTime)
  return { db: found.magnitudeDb[0]!, deg: found.phaseDeg[0]!, s: found.sensitivityDb[0]!, t: found.complementaryDb[0]! }
}

function over(numerator: number[], denominator: number[], options?: FrequencyOptions, deadTime = 0) {
  return frequencyResponse(closeLoop({ ...loopOf(numerator, denominator), deadTime }, { form: 'gain' }, { k: 1 }), options)
}

const decibels = (size: number) => 20 * Math.log10(size)
/** Degrees brought to (-180, 180]. */
const wrapped = (degrees: number) => degrees - 360 * Math.round(degrees / 360)

describe('loops whose figures are known in closed form', () => {
  it('a first-order lag at its corner: -3.0103 dB and -45 degrees', () => {
    const corner = at([1], [0.25, 1], 4)
    expect(corner.db).toBeCloseTo(-3.010299956639812, 12)
    expect(corner.deg).toBeCloseTo(-45, 12)
    // S = (s + 4)/(s + 8), T = 4/(s + 8) at s = 4j.
    expect(corner.s).toBeCloseTo(decibels(Math.sqrt(32 / 80)), 12)
    expect(corner.t).toBeCloseTo(decibels(4 / Math.sqrt(80)), 12)
  })

  it('integrators: a quarter turn and 20 dB a decade for each', () => {
    const one = over([3], [1, 0], { from: 0.1, to: 1000, samples: 41 })
    one.frequency.forEach((w, i) => expect(one.magnitudeDb[i]).toBeCloseTo(decibels(3 / w), 10))
    expect(new Set(one.phaseDeg)).toEqual(new Set([-90]))
    const two = at([1], [1, 0, 0], 10)
    expect([two.db, two.deg]).toEqual([expect.closeTo(-40, 12), -180])
  })

  it('begins half a turn lower where the gain at low frequency is negative', () => {
    expect(at([-1], [1, 1, 0], 1e-9).deg).toBeCloseTo(-270, 6)
    // A pole to the right: 1/(s - 1) goes from -180 to -90 degrees.
    expect(at([1], [1, -1], 1e-9).deg).toBeCloseTo(-180, 6)
    expect(at([1], [1, -1], 1).deg).toBeCloseTo(-135, 12)
    // A zero to the right: 0.9 (1 - s)/(1 + s) loses half a turn without a change of size.
    expect(at([-0.9, 0.9], [1, 1], 1)).toMatchObject({ db: expect.closeTo(decibels(0.9), 12), deg: expect.closeTo(-90, 12) })
    expect(at([-0.9, 0.9], [1, 1], 1e6).deg).toBeCloseTo(-180, 3)
    // A zero at the origin leads by a quarter turn.
    expect(at([1, 0], [1, 1], 1e-9).deg).toBeCloseTo(90, 6)
  })

  it('ends at 400 dB on poles and zeros of the axis, where the phase turns by half a turn', () => {
    const found = over([1, 0, 9], product([1, 0, 4], [1, 1]), { from: 0.1, to: 100, samples: 50 })
    expect([...found.magnitudeDb, ...found.phaseDeg, ...found.sensitivityDb, ...found.complementaryDb].every(Number.isFinite)).toBe(true)
    const [pole, zero] = [found.frequency.indexOf(2), found.frequency.indexOf(3)]
    expect([found.magnitudeDb[pole], found.sensitivityDb[pole], found.complementaryDb[pole]]).toEqual([400, -400, expect.closeTo(0, 12)])
    expect([found.magnitudeDb[zero], found.sensitivityDb[zero], found.complementaryDb[zero]]).toEqual([-400, expect.closeTo(0, 12), -400])
    expect(found.phaseDeg[pole + 1]! - found.phaseDeg[pole - 1]!).toBeCloseTo(-180, 0)
    expect(found.phaseDeg[zero + 1]! - found.phaseDeg[zero - 1]!).toBeCloseTo(180, 0)
  })

  it('a border of stability is drawn to 400 dB and has no peak', () => {
    // (s + 1)(s + 2) s + 6 has the roots +-j sqrt 2.
    const found = over([6], [1, 3, 2, 0])
    expect(Math.max(...found.sensitivityDb)).toBeGreaterThan(200)
    expect(found.sensitivityPeakFrequency).toBeNull()
  })

  it('a pole that a zero takes away leaves no trace, on the axis neither', () => {
    const { db, deg } = at([1, 0, 4], product([1, 0, 4], [1, 1]), 2)
    expect(db).toBeCloseTo(decibels(1 / Math.sqrt(5)), 9)
    expect(deg).toBeCloseTo(-Math.atan(2) * 180 / Math.PI, 9)
  })

  it('dead time turns the phase by -wT and leaves the size', () => {
    const [w, deadTime] = [30, 0.4]
    const late = at([5], [1, 1], w, deadTime)
    expect(late.deg).toBeCloseTo((-Math.atan(w) - w * deadTime) * 180 / Math.PI, 9)
    const value = divide({ re: 5 * Math.cos(w * deadTime), im: -5 * Math.sin(w * deadTime) }, { re: 1, im: w })
    expect(late.db).toBeCloseTo(decibels(abs(value)), 10)
    expect(late.s).toBeCloseTo(-decibels(abs(add(one, value))), 10)
    expect(late.t).toBeCloseTo(decibels(abs(divide(value, add(one, value)))), 10)
  })
})

describe('the frequency of the sensitivity peak', () => {
  it('1/(s (s + 1)): from the derivative of |S|^2', () => {
    // |S|^2 = x (x + 1)/((1 - x)^2 + x), x = w^2; its derivative vanishes where -2x^2 + 2x + 1 = 0.
    const found = over([1], [1, 1, 0]).sensitivityPeakFrequency
    expectClose(found, Math.sqrt((1 + Math.sqrt(3)) / 2), 1e-7, 'peak frequency')
  })

  it('has no frequency where |S| only rises towards 1, and does not depend on the range that is asked for', () => {
    expect(over([3], [1, 1]).sensitivityPeakFrequency).toBeNull()
    expect(over([1], [1, 1, 0], { from: 100, to: 1000 }).sensitivityPeakFrequency).toBe(over([1], [1, 1, 0]).sensitivityPeakFrequency)
  })

  it('is where |S| takes the reading\'s value, for random stable loops', () => {
    let checked = 0
    for (const [n, loop] of fc.sample(arbitraryLoop(1, 7), { seed: 12, numRuns: 400 }).entries()) {
      const { stable, readings } = evaluateLoop(loop)
      const peak = over(loop.numerator, loop.denominator).sensitivityPeakFrequency
      if (!stable || peak === null || readings.sensitivityPeak === null) continue
      expectClose(1 / abs(add(one, evaluateAt(loop, { re: 0, im: peak }))), readings.sensitivityPeak, 1e-8, `loop ${n}`)
      checked++
    }
    expect(checked).toBeGreaterThan(40)
  })
})

describe('random loops', () => {
  it('agree with the direct complex evaluation, and the phase never jumps', () => {
    for (const [n, { numerator, denominator }] of fc.sample(arbitraryLoop(1, 9), { seed: 2024, numRuns: 300 }).entries()) {
      const found = over(numerator, denominator, { samples: 200 })
      const off = { magnitude: 0, sensitivity: 0, complementary: 0, phase: 0 }
      const note = (what: keyof typeof off, deviation: number) => { off[what] = Math.max(off[what], Math.abs(deviation)) }
      found.frequency.forEach((w, i) => {
        const s = { re: 0, im: w }
        const [top, bottom] = [evaluateComplex(numerator, s), evaluateComplex(denominator, s)]
        const characteristic = add(top, bottom)
        // Close to a root on the axis the direct evaluation has no digits left.
        if (Math.min(abs(top), abs(bottom), abs(characteristic)) < 1e-6 * Math.max(abs(top), abs(bottom))) return
        note('magnitude', found.magnitudeDb[i]! - decibels(abs(divide(top, bottom))))
        note('sensitivity', found.sensitivityDb[i]! - decibels(abs(bottom) / abs(characteristic)))
        note('complementary', found.complementaryDb[i]! - decibels(abs(top) / abs(characteristic)))
        note('phase', wrapped(found.phaseDeg[i]! - arg(divide(top, bottom)) * 180 / Math.PI))
      })
      expect(Math.max(...Object.values(off)), `loop ${n}: ${JSON.stringify(off)}`).toBeLessThan(1e-6)
      const steps = found.frequency.slice(1).map((w, i) => ({ w: w - found.frequency[i]!, phase: Math.abs(found.phaseDeg[i + 1]! - found.phaseDeg[i]!) }))
      expect(Math.min(...steps.map(({ w }) => w))).toBeGreaterThan(0)
      // A root on the axis turns the phase by half a turn, a point on the root itself by a quarter.
      expect(Math.max(...steps.map(({ phase }) => phase)), `loop ${n}`).toBeLessThan(180)
    }
  })

  it('of a sampled loop: the margins of the readings, up to half the sampling rate, without a jump of the phase', () => {
    const model: LoopModel = { plant: { numerator: [30], denominator: [1, 8, 15, 0] }, rateFeedback: 0, deadTime: 0.013, sampling: { period: 0.05, computingDelay: true } }
    const closed = closeLoop(model, { form: 'gain' }, { k: 0.5 })
    const { phaseMarginDeg, gainCrossover, gainMarginDb, phaseCrossover } = closed.frequencyFigures()
    const reading = (w: number) => {
      const found = frequencyResponse(closed, { from: w, to: 1.1 * w, samples: 20 })
      return { db: found.magnitudeDb[0]!, deg: found.phaseDeg[0]! }
    }
    expect(reading(gainCrossover!).db).toBeCloseTo(0, 8)
    expect(180 + reading(gainCrossover!).deg).toBeCloseTo(phaseMarginDeg!, 7)
    expect(-reading(phaseCrossover!).db).toBeCloseTo(gainMarginDb!, 7)
    const whole = frequencyResponse(closed)
    expect(whole.frequency.at(-1)).toBeCloseTo(Math.PI / 0.05, 10)
    expect(Math.max(...whole.phaseDeg.slice(1).map((phase, i) => Math.abs(phase - whole.phaseDeg[i]!)))).toBeLessThan(60)
    expect(whole.phaseDeg[0]!).toBeGreaterThan(-95)
    expect(() => frequencyResponse(closed, { from: 100, to: 200 })).toThrow(/sampling rate/)
  })

  it('of every controller form: L is that of the loop broken at the plant input', () => {
    const model: LoopModel = { plant: { numerator: [2], denominator: [1, 1, 0] }, sensor: { numerator: [1], denominator: [0.1, 1] }, rateFeedback: 0.3 }
    const designs: [Controller, Gains][] = [
      [{ form: 'pd', derivativeFilter: 0.02 }, { kp: 2, kd: 1 }], [{ form: 'pi' }, { kp: 1, ki: 0.2 }], [{ form: 'rate' }, { kp: 2, kr: 0.5 }],
      [{ form: 'lead', poleZeroRatio: 5 }, { k: 2, zero: -1, pole: -5 }],
    ]
    for (const [controller, gains] of designs) {
      const closed = closeLoop(model, controller, gains)
      const found = frequencyResponse(closed)
      found.frequency.forEach((w, i) => expect(found.magnitudeDb[i]).toBeCloseTo(decibels(abs(evaluateAt(closed.functions.loop, { re: 0, im: w }))), 8))
    }
  })
})

describe('where it looks', () => {
  it('half a decade to one and a half beyond the break frequencies, at whole decades', () => {
    const real = (...sizes: number[]) => sizes.map(size => ({ re: -size, im: 0 }))
    expect(usualRange(real(1, 5))).toEqual({ from: 0.1, to: 100 })
    expect(usualRange(real(0.3, 5))).toEqual({ from: 0.01, to: 100 })
    expect(usualRange(real(0, 0))).toEqual({ from: 0.1, to: 10 })
    expect(usualRange(real(1e-200, 1e200))).toEqual({ from: 1e-150, to: 1e150 })
  })

  it('keeps to the range, and an end that is given moves the other one out of the way', () => {
    const ends = (options: FrequencyOptions) => {
      const { frequency } = over([1], [1, 1], options)
      return [frequency[0], frequency.at(-1)]
    }
    expect(ends({})).toEqual([0.1, 10])
    expect(ends({ from: 0.3, to: 7 })).toEqual([0.3, 7])
    expect(ends({ from: 50 })).toEqual([50, 500])
    expect(ends({ to: 0.01 })).toEqual([0.001, 0.01])
  })

  it('misses no resonance, however narrow', () => {
    // A root of damping ratio 1e-6 in front of a lag: the peak is 1/(2 zeta) high and 1e-6 wide.
    const found = over([1], product([1, 2e-6 * 7, 49], [1, 1]), { samples: 20 })
    expect(Math.max(...found.magnitudeDb)).toBeGreaterThan(decibels(1 / (2e-6 * 49 * Math.sqrt(50))) - 0.1)
    const extra = sampleFrequencies({ from: 0.1, to: 1000 }, 400, [{ re: -0.01, im: 7 }, { re: -0.01, im: -7 }])
    expect(extra.length).toBeGreaterThan(400)
    expect(extra.length).toBeLessThanOrEqual(420)
    expect(extra).toContain(7)
  })

  it('draws nothing without a loop', () => {
    const none = closeLoop(loopOf([1], [1, 1]), { form: 'gain' }, { k: 0 })
    expect(() => frequencyResponse(none)).toThrow(NoAnswerError)
  })

  it('finds a maximum within half the digits, and an end where there is none inside', () => {
    expect(findMaximum(x => -((x - 0.3) ** 2), -1, 2)).toBeCloseTo(0.3, 7)
    expect(findMaximum(x => x, 0, 1)).toBeCloseTo(1, 6)
    expect(findMaximum(() => 1, 2, 2)).toBe(2)
  })
})
