/** A loop in other units of time is the same loop: times, frequencies and gains change by the unit, nothing else does. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { analyzeLoop } from '#shared/control/analyze'
import { solveDesign } from '#shared/control/solve'
import type { LoopAnalysis, Readings, TransferFunction } from '#shared/control/types'
import { arbitraryLoop, loopGain } from '../helpers/arbitrary-loop'
import { holds } from '../helpers/property'

/** 1 to 9 times a power of ten from 1e-6 to 1e6. */
const unit = fc.tuple(fc.integer({ min: 1, max: 9 }), fc.integer({ min: -6, max: 6 })).map(([digit, decade]) => digit * 10 ** decade)

/** The loop with s/factor in place of s: `factor` times as fast. */
function faster({ numerator, denominator }: TransferFunction, factor: number): TransferFunction {
  const scaled = (p: number[]) => p.map((c, i) => c * factor ** (i - (p.length - 1)))
  return { numerator: scaled(numerator), denominator: scaled(denominator) }
}

/** By which power of the factor a reading changes. */
const powers: Record<Exclude<keyof Readings, 'gainMargin'>, number> = {
  finalValue: 0, overshootPercent: 0, peakTime: -1, riseTime: -1, settlingTime: -1, steadyStateErrorStep: 0, steadyStateErrorRamp: -1, peakEffort: 0,
  gainMarginDb: 0, phaseMarginDeg: 0, gainCrossover: 1, phaseCrossover: 1, delayMargin: -1, sensitivityPeak: 0, bandwidth: 1,
}

/** Named as in docs/method.md, "accuracy that must hold", with room for the rounding of the scaled coefficients. */
const tolerance = 1e-7

function expectScaled(found: number | null, was: number | null, scale: number, what: string): void {
  if (was === null || found === null) return expect(found, what).toBe(was)
  expect(Math.abs(found - was * scale) / Math.max(Math.abs(was * scale), 1e-3 * scale), `${what}: ${found} against ${was * scale}`).toBeLessThan(tolerance)
}

describe('a loop in other units of time', () => {
  it('has the same readings, times and frequencies in those units', () => {
    let stable = 0
    holds(13, 250, [arbitraryLoop(2, 6), loopGain, unit], (plant, k, factor) => {
      const readingsOf = (g: TransferFunction) => {
        try {
          return solveDesign({ plant: g, rateFeedback: 0 }, { form: 'gain' }, { gains: { k } }, { response: { samples: 20 } }).readings
        }
        catch {
          return null
        }
      }
      const [was, is] = [readingsOf(plant), readingsOf(faster(plant, factor))]
      if (was === null || is === null) return expect(is).toBe(was)
      if (was.finalValue !== null) stable++
      for (const [name, power] of Object.entries(powers) as [keyof typeof powers, number][]) expectScaled(is[name], was[name], factor ** power, name)
      expectScaled(is.gainMargin.upper, was.gainMargin.upper, 1, 'upper gain margin')
      expectScaled(is.gainMargin.lower, was.gainMargin.lower, 1, 'lower gain margin')
    })
    expect(stable).toBeGreaterThan(40)
  })

  it('has the same locus, drawn larger', () => {
    // Zeros that only the rounding of coefficients parts meet again at gains of 1e14: those change with the rounding.
    // Of a pair one tells both, in whichever order they come.
    const counts = ({ point, gain }: LoopAnalysis['breakaways'][number]) => gain < 1e10 && point.im >= 0
    const figures = ({ breakaways: all, imaginaryAxisCrossings, departures, arrivals, stableGain, asymptotes, rayIntersections }: LoopAnalysis, breakaways = all.filter(counts)) => ({
      places: [...breakaways, ...rayIntersections!].flatMap(({ point }) => [point.re, point.im])
        .concat(imaginaryAxisCrossings.map(({ frequency }) => frequency), asymptotes?.centroid ?? []),
      gains: [...breakaways, ...rayIntersections!, ...imaginaryAxisCrossings].map(({ gain }) => gain).concat(stableGain.flat().filter(end => end !== null)),
      // From just below -180 degrees on, so that 180 and -180, one direction, stand beside each other; those of one place are in no order.
      angles: [...departures, ...arrivals].map(({ angleDeg }) => (angleDeg + 181) % 360).sort((a, b) => a - b),
    })
    holds(14, 120, [arbitraryLoop(1, 5), unit], (plant, factor) => {
      const analyze = (g: TransferFunction) => figures(analyzeLoop({ plant: g, rateFeedback: 0 }, { form: 'gain' }, { dampingRatio: 0.5 }))
      const [was, is] = [analyze(plant), analyze(faster(plant, factor))]
      const size = Math.max(1e-3, ...was.places.map(Math.abs))
      expect(is.places).toHaveLength(was.places.length)
      is.places.forEach((place, i) => expect(Math.abs(place / factor - was.places[i]!) / size).toBeLessThan(tolerance))
      expect(is.gains).toHaveLength(was.gains.length)
      is.gains.forEach((gain, i) => expectScaled(gain, was.gains[i]!, 1, 'gain'))
      expect(is.angles).toHaveLength(was.angles.length)
      is.angles.forEach((angle, i) => expect(Math.abs(angle - was.angles[i]!)).toBeLessThan(1e-5))
    })
  })
})
