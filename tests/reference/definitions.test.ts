/**
 * The readings against the published wording of what they mean, each evaluated by brute force on curves known in closed form. The wording is paraphrased from
 * memory: IEC 60050-351 (International Electrotechnical Vocabulary, control technology) and ANSI/ISA-51.1 (process instrumentation terminology); for figures
 * over frequency K. J. Astrom, R. M. Murray, "Feedback Systems".
 */
import { describe, expect, it } from 'vitest'
import type { Readings, TransferFunction } from '#shared/control/types'
import { closedLoopOf, evaluateLoop, product } from '../helpers/loops'

type Curve = (t: number) => number

interface Known {
  name: string
  /** Closed loop, and its unit step response in closed form. */
  closed: TransferFunction
  curve: Curve
  final: number
  /** Seconds after which nothing moves any more. */
  end: number
}

/** wn^2 gain/(s^2 + 2 zeta wn s + wn^2). */
function secondOrder(zeta: number, wn: number, gain = 1): Known {
  const damped = Math.sqrt(1 - zeta * zeta)
  return {
    name: `pair of damping ratio ${zeta}, final value ${gain}`,
    closed: { numerator: [gain * wn * wn], denominator: [1, 2 * zeta * wn, wn * wn] },
    curve: t => gain * (1 - Math.exp(-zeta * wn * t) * (Math.cos(damped * wn * t) + zeta / damped * Math.sin(damped * wn * t))),
    final: gain,
    end: 30 / (zeta * wn),
  }
}

const curves: Known[] = [
  secondOrder(0.2, 3), secondOrder(0.5, 0.7, 2.5), secondOrder(0.8, 10, -1.5),
  { name: 'one lag', closed: { numerator: [1], denominator: [2, 1] }, curve: t => 1 - Math.exp(-t / 2), final: 1, end: 60 },
  {
    name: 'two equal lags', closed: { numerator: [4], denominator: [1, 4, 4] }, curve: t => 1 - (1 + 2 * t) * Math.exp(-2 * t), final: 1, end: 15,
  },
  {
    // (1 - s)/((s + 1)(s/3 + 1)): it sets out the wrong way.
    name: 'zero in the right half plane', closed: { numerator: [-3, 3], denominator: [1, 4, 3] }, curve: t => 1 - 3 * Math.exp(-t) + 2 * Math.exp(-3 * t), final: 1, end: 30,
  },
  {
    // (1 + 2 s)/(s + 1)^2: the zero alone makes it overshoot.
    name: 'slow zero over two equal lags', closed: { numerator: [2, 1], denominator: [1, 2, 1] }, curve: t => 1 - Math.exp(-t) + t * Math.exp(-t), final: 1, end: 40,
  },
]

const steps = 400_000

/** Times from 0 to the end, so close that a definition can be read off them. */
const timesOf = ({ end }: Known) => Array.from({ length: steps + 1 }, (_, n) => end * n / steps)

function readingsOf({ closed }: Known, settlingBandPercent = 2): Readings {
  const { stable, readings } = closedLoopOf(closed.numerator, closed.denominator, { response: { settlingBandPercent } })
  expect(stable).toBe(true)
  return readings
}

describe.each(curves.map(known => ({ name: known.name, known })))('$name', ({ known }) => {
  const times = timesOf(known)
  const values = times.map(known.curve)
  const share = values.map(value => value / known.final)
  const resolution = known.end / steps

  it('final value: what the output settles at once transients have died out (steady state, IEC)', () => {
    expect(Math.abs(readingsOf(known).finalValue! / values.at(-1)! - 1)).toBeLessThan(1e-9)
  })

  it('overshoot: the greatest transient deviation beyond the final value, as a percentage of the change (ISA, IEC); peak time: when it occurs', () => {
    const largest = share.reduce((best, value, n) => value > share[best]! ? n : best, 0)
    const { overshootPercent, peakTime } = readingsOf(known)
    if (share[largest]! - 1 < 1e-9) {
      expect({ overshootPercent, peakTime }).toEqual({ overshootPercent: 0, peakTime: null })
      return
    }
    expect(Math.abs(overshootPercent! - 100 * (share[largest]! - 1))).toBeLessThan(1e-5)
    expect(Math.abs(peakTime! - times[largest]!)).toBeLessThanOrEqual(resolution)
  })

  it('rise time: from when the output first reaches a small share of its change (10 %) to when it first reaches a large one (90 %) (ISA, IEC)', () => {
    const first = (level: number) => times[share.findIndex(value => value >= level)]!
    expect(Math.abs(readingsOf(known).riseTime! - (first(0.9) - first(0.1)))).toBeLessThanOrEqual(2 * resolution)
  })

  it.each([1, 2, 5])('settling time: from the step to when the output enters and remains within a band about its final value (ISA, IEC): %i %', (percent) => {
    const lastOutside = share.findLastIndex(value => Math.abs(value - 1) > percent / 100)
    expect(Math.abs(readingsOf(known, percent).settlingTime! - times[lastOutside]!)).toBeLessThanOrEqual(resolution)
  })

  it('steady-state error: the difference of reference and output that remains (steady-state deviation, IEC)', () => {
    expect(Math.abs(readingsOf(known).steadyStateErrorStep! - (1 - values.at(-1)!))).toBeLessThan(1e-9)
  })

  it('bandwidth: the frequency up to which the gain of the closed loop stays above 0.707 of that at rest', () => {
    const { numerator, denominator } = known.closed
    const gain = (w: number) => size(numerator, w) / size(denominator, w)
    const { bandwidth } = readingsOf(known)
    const frequencies = Array.from({ length: 60_001 }, (_, n) => 10 ** (n / 10_000 - 3))
    const first = frequencies.findIndex(w => gain(w) < gain(0) * Math.SQRT1_2)
    expect(bandwidth!).toBeLessThanOrEqual(frequencies[first]!)
    expect(bandwidth!).toBeGreaterThan(frequencies[first - 1]!)
  })
})

describe('two figures that are easily taken for each other', () => {
  it('reaching 98 % for the first time is not settling to 2 %: "step response time" and "settling time" are two terms of the vocabulary', () => {
    const known = secondOrder(0.5, 1)
    const firstTime = timesOf(known).find(t => known.curve(t) >= 0.98)!
    expect(firstTime).toBeCloseTo(2.35, 2)
    expect(readingsOf(known).settlingTime!).toBeGreaterThan(3 * firstTime)
  })

  it('an output that first moves the wrong way (undershoot) has no overshoot for that', () => {
    const known = curves.find(({ name }) => name === 'zero in the right half plane')!
    expect(least(timesOf(known).map(known.curve))).toBeLessThan(-0.3)
    expect(readingsOf(known).overshootPercent).toBe(0)
  })
})

describe('margins by their meaning: how much more the loop bears', () => {
  const loop = { numerator: [8], denominator: product([1, 0], [1, 1], [1, 5]) }
  const { readings, closedLoopPoles } = evaluateLoop(loop)

  it('gain margin: the factor on the gain that brings the loop to the border of stability', () => {
    expect(closedLoopPoles.every(({ re }) => re < 0)).toBe(true)
    const stableAt = (factor: number) => evaluateLoop({ ...loop, numerator: [8 * factor] }).stable
    const { upper } = readings.gainMargin
    expect([stableAt(upper! * (1 - 1e-9)), stableAt(upper! * (1 + 1e-9))]).toEqual([true, false])
    expect(readings.gainMarginDb).toBeCloseTo(20 * Math.log10(upper!), 12)
  })

  it('phase margin: the angle by which L may turn back at the frequency where its size is 1', () => {
    const w = readings.gainCrossover!
    const angle = -Math.PI / 2 - Math.atan(w) - Math.atan(w / 5)
    expect(8 / (w * Math.hypot(1, w) * Math.hypot(5, w))).toBeCloseTo(1, 12)
    expect(readings.phaseMarginDeg).toBeCloseTo(180 + angle * 180 / Math.PI, 10)
  })

  it('delay margin: the dead time that uses up the phase margin', () => {
    expect(readings.delayMargin).toBeCloseTo(readings.phaseMarginDeg! * Math.PI / 180 / readings.gainCrossover!, 12)
  })

  it('sensitivity peak: one over the least distance of L from -1', () => {
    const distance = (w: number) => size([1, 6, 5, 8], w) / size([1, 6, 5, 0], w)
    const nearest = least(Array.from({ length: steps }, (_, n) => distance(10 ** (5 * n / steps - 2.5))))
    expect(Math.abs(readings.sensitivityPeak! * nearest - 1)).toBeLessThan(1e-8)
    expect(readings.sensitivityPeak! * nearest).toBeGreaterThan(1 - 1e-12)
  })
})

const least = (values: readonly number[]) => values.reduce((low, value) => Math.min(low, value), Infinity)

/** |p(jw)|. */
function size(p: readonly number[], w: number): number {
  let [re, im] = [0, 0]
  for (const c of p) [re, im] = [-im * w + c, re * w]
  return Math.hypot(re, im)
}
