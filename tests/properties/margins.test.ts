/**
 * Margins, bandwidth and sensitivity peak against a dense sweep of the frequency: K. J. Astrom, R. M. Murray, "Feedback Systems", section on stability
 * margins, taken at its word. The sweep sees what crosses between two of its frequencies; where L only touches, the crossing must still be one.
 */
import { describe, expect, it } from 'vitest'
import { margins } from '#shared/control/frequency/margins'
import { closeLoop } from '#shared/control/closed-loop'
import { NoAnswerError } from '#shared/control/errors'
import { readAll } from '#shared/control/readings'
import { evaluateAt } from '#shared/control/transfer-function'
import type { Readings, TransferFunction } from '#shared/control/types'
import { abs, add, arg, negate, one, type Complex } from '#shared/numerics/complex'
import { findRoot } from '#shared/numerics/find-root'
import { roots } from '#shared/numerics/roots'
import { arbitraryLoop, loopGain } from '../helpers/arbitrary-loop'
import { holds } from '../helpers/property'

/** From 1e-4 to 1e4 rad/s: the places of these loops lie between 0.2 and 5 rad/s, and nothing happens that far beyond them. */
const frequencies = Array.from({ length: 16001 }, (_, n) => 10 ** (n / 2000 - 4))

interface Sweep {
  /** Frequencies at which L crosses the negative real axis, and at which |L| crosses 1. */
  phaseCrossings: number[]
  gainCrossings: number[]
  sensitivityPeak: number
}

function sweep(loop: TransferFunction): Sweep {
  const at = (w: number) => evaluateAt(loop, { re: 0, im: w })
  const found: Sweep = { phaseCrossings: [], gainCrossings: [], sensitivityPeak: 0 }
  const refine = (f: (w: number) => number, a: number, b: number) => findRoot(f, a, b, 1e-14)
  let before = at(frequencies[0]!)
  for (let n = 1; n < frequencies.length; n++) {
    const [a, b] = [frequencies[n - 1]!, frequencies[n]!]
    const here = at(b)
    if (before.re < 0 && here.re < 0 && before.im * here.im < 0) found.phaseCrossings.push(refine(w => at(w).im, a, b))
    if ((abs(before) - 1) * (abs(here) - 1) < 0) found.gainCrossings.push(refine(w => abs(at(w)) - 1, a, b))
    found.sensitivityPeak = Math.max(found.sensitivityPeak, 1 / abs(add(one, here)))
    before = here
  }
  return found
}

const marginAt = (l: Complex) => arg(negate(l)) * 180 / Math.PI

/** The nearest factor above and below 1, crossings at s = 0 and at infinity included, which no sweep reaches. */
function gainMarginsOf(loop: TransferFunction, crossings: number[]): { upper: number, lower: number } {
  const { numerator, denominator } = loop
  const atZero = -denominator.at(-1)! / numerator.at(-1)!
  const atInfinity = numerator.length === denominator.length ? -denominator[0]! / numerator[0]! : NaN
  const factors = [...crossings.map(w => 1 / abs(evaluateAt(loop, { re: 0, im: w }))), atZero, atInfinity].filter(f => f > 0 && Number.isFinite(f))
  return { upper: Math.min(Infinity, ...factors.filter(f => f >= 1)), lower: Math.max(0, ...factors.filter(f => f < 1)) }
}

/** What `readAll` makes of a loop; null for an algebraic one. */
function readingsOf(plant: TransferFunction, k: number): { readings: Readings, loop: TransferFunction, stable: boolean } | null {
  try {
    const closed = closeLoop({ plant, rateFeedback: 0 }, { form: 'gain' }, { k })
    const readings = readAll(closed, closed.respondTo('reference-step', 1), { amplitude: 1, settlingBandPercent: 2 })
    return { readings, loop: closed.functions.loop, stable: closed.stable }
  }
  catch (error) {
    expect(error).toBeInstanceOf(NoAnswerError)
    return null
  }
}

describe('margins', () => {
  it('agree with a dense sweep of the frequency', () => {
    let [withPhase, withGain] = [0, 0]
    holds(50, 120, [arbitraryLoop(1, 7), loopGain], (plant, k) => {
      const found = readingsOf(plant, k)
      if (found === null) return
      const { loop, readings: { gainMargin, phaseMarginDeg, gainCrossover, sensitivityPeak, delayMargin }, stable } = found
      const swept = sweep(loop)
      const { upper, lower } = gainMarginsOf(loop, swept.phaseCrossings)
      const at = (w: number) => evaluateAt(loop, { re: 0, im: w })
      // No crossing that the sweep sees lies nearer than the margin; and the margin is a crossing.
      expect(gainMargin.upper ?? Infinity).toBeLessThanOrEqual(upper * (1 + 1e-8))
      expect(gainMargin.lower ?? 0).toBeGreaterThanOrEqual(lower * (1 - 1e-8))
      for (const factor of [gainMargin.upper, gainMargin.lower]) {
        if (factor === null) continue
        withGain++
        expect(isOnBorder(plant, k * factor), `a root on the axis at ${factor} times the gain`).toBe(true)
      }
      const smallest = Math.min(Infinity, ...swept.gainCrossings.map(w => Math.abs(marginAt(at(w)))))
      expect(Math.abs(phaseMarginDeg ?? Infinity)).toBeLessThanOrEqual(smallest + 1e-6)
      if (gainCrossover !== null) {
        withPhase++
        expect(Math.abs(abs(at(gainCrossover)) - 1)).toBeLessThan(1e-8)
        expect(Math.abs(marginAt(at(gainCrossover)) - phaseMarginDeg!)).toBeLessThan(1e-6)
      }
      expect(sensitivityPeak ?? Infinity).toBeGreaterThanOrEqual(swept.sensitivityPeak * (1 - 1e-9))
      if (stable && delayMargin !== null && delayMargin > 0) {
        const delays = swept.gainCrossings.map(w => ((marginAt(at(w)) + 360) % 360) * Math.PI / 180 / w)
        expect(delayMargin).toBeLessThanOrEqual(Math.min(Infinity, ...delays) * (1 + 1e-8))
      }
    })
    expect(withPhase).toBeGreaterThan(40)
    expect(withGain).toBeGreaterThan(40)
  })

  it('of a loop with its gain at the margin are 1, 0 dB and no phase at all', () => {
    let checked = 0
    holds(51, 200, [arbitraryLoop(2, 6), loopGain], (plant, k) => {
      const found = readingsOf(plant, k)
      const upper = found?.readings.gainMargin.upper ?? null
      if (found === null || upper === null || found.readings.phaseCrossover === null || found.readings.phaseCrossover === 0) return
      if (Math.abs(found.readings.gainMarginDb! - 20 * Math.log10(upper)) > 1e-9) return
      checked++
      const there = margins({ numerator: found.loop.numerator.map(c => c * upper), denominator: found.loop.denominator }, false)
      expect(Math.abs(there.gainMarginDb!)).toBeLessThan(1e-7)
      expect(Math.abs(there.phaseMarginDeg!)).toBeLessThan(1e-4)
      expect(Math.abs(there.phaseCrossover! / found.readings.phaseCrossover - 1)).toBeLessThan(1e-7)
    })
    expect(checked).toBeGreaterThan(30)
  })
})

describe('the bandwidth', () => {
  it('is the first frequency of a dense sweep at which |T| has fallen to |T(0)|/sqrt 2', () => {
    let checked = 0
    holds(52, 150, [arbitraryLoop(1, 7), loopGain], (plant, k) => {
      const found = readingsOf(plant, k)
      if (!found?.stable) return
      const closed = closeLoop({ plant, rateFeedback: 0 }, { form: 'gain' }, { k }).functions.reference
      const size = (w: number) => abs(evaluateAt(closed, { re: 0, im: w }))
      const level = size(0) / Math.SQRT2
      const { bandwidth } = found.readings
      const first = frequencies.find(w => size(w) < level)
      if (bandwidth === null) return expect(level === 0 ? undefined : first).toBe(undefined)
      checked++
      expect(Math.abs(size(bandwidth) / level - 1)).toBeLessThan(1e-8)
      if (first !== undefined) expect(bandwidth).toBeLessThanOrEqual(first * (1 + 1e-8))
      expect(frequencies.filter(w => w < bandwidth * (1 - 1e-6)).every(w => size(w) >= level * (1 - 1e-9))).toBe(true)
    })
    expect(checked).toBeGreaterThan(25)
  })
})

/** Whether a closed-loop root lies on the imaginary axis, at the origin or at infinity, as far as its own size lets it be told. */
function isOnBorder({ numerator, denominator }: TransferFunction, gain: number): boolean {
  const shift = denominator.length - numerator.length
  const sum = denominator.map((c, i) => c + gain * (numerator[i - shift] ?? 0))
  if (Math.abs(sum[0]!) < 1e-8 * Math.abs(denominator[0]!) || Math.abs(sum.at(-1)!) < 1e-8 * Math.abs(denominator.at(-1)!)) return true
  return roots(sum).some(root => Math.abs(root.re) < 1e-6 * Math.hypot(root.re, root.im))
}
