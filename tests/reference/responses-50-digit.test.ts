import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { distance, type Complex } from '#shared/numerics/complex'
import { solveDesign } from '#shared/control/solve'
import type { TransferFunction } from '#shared/control/types'
import { deviationOf, holdDeviation } from '../helpers/published'

/** Closed loops at a design point with one free gain, solved with mpmath in 50-digit arithmetic by the definitions of docs/method.md. */
interface OneGainCase {
  kind: string
  plant: TransferFunction
  shape: TransferFunction
  designPoint: Complex
  gain: number
  closedLoopPoles: Complex[]
  step: { time: number[], output: number[] }
  figures: { finalValue: number, overshootPercent: number, peakTime: number | null, riseTime: number, settlingTime: number }
  margins: {
    phaseMarginDeg: number | null
    gainCrossover: number | null
    gainMargin: { upper: number | null, lower: number | null }
    sensitivityPeak: number
  }
}

const { oneGain } = JSON.parse(readFileSync(new URL('../fixtures/loops-50-digit.json', import.meta.url), 'utf8')) as { oneGain: OneGainCase[] }

/** Named as in docs/method.md, "accuracy that must hold"; the response itself is held tighter. */
const tolerance = { root: 1e-10, gain: 1e-10, overshootPoints: 1e-6, time: 1e-7, margin: 1e-8, output: 1e-11 }

function holdFigure(group: string, actual: number | null, wanted: number | null, relative: number): void {
  if (wanted === null || actual === null) return expect(actual, group).toBe(wanted)
  holdDeviation(group, deviationOf(actual, wanted), relative)
}

describe('closed loops against 50-digit arithmetic', () => {
  it('has all 48 of them', () => expect(oneGain).toHaveLength(48))

  it.each(oneGain.map((one, i) => ({ name: `${i} (${one.kind})`, one })))('loop $name', ({ one }) => {
    const { plant, shape, designPoint, step, figures, margins } = one
    const solution = solveDesign({ plant: { numerator: plant.numerator, denominator: plant.denominator }, rateFeedback: 0 }, { form: 'gain', shape }, { designPoint }, {
      response: { duration: step.time[40]!, samples: 41 },
    })
    holdFigure('Gain of the magnitude condition', (solution.gains as { k: number }).k, one.gain, tolerance.gain)
    expect(solution.onLocus).toBe(true)
    expect(solution.stable).toBe(true)
    expect(solution.closedLoopPoles).toHaveLength(one.closedLoopPoles.length)
    for (const pole of one.closedLoopPoles) {
      const nearest = Math.min(...solution.closedLoopPoles.map(other => distance(other, pole)))
      holdDeviation('Closed-loop root', nearest / Math.hypot(pole.re, pole.im), tolerance.root)
    }
    solution.response.output.forEach((value, k) => {
      expect(solution.response.time[k]).toBeCloseTo(step.time[k]!, 12)
      holdDeviation('Step response, of its final value', Math.abs(value - step.output[k]!) / Math.abs(figures.finalValue), tolerance.output)
    })
    const { readings } = solution
    holdFigure('Final value', readings.finalValue, figures.finalValue, tolerance.gain)
    holdDeviation('Overshoot, in points', Math.abs(readings.overshootPercent! - figures.overshootPercent), tolerance.overshootPoints)
    holdFigure('Peak time', readings.peakTime, figures.peakTime, tolerance.time)
    holdFigure('Rise time', readings.riseTime, figures.riseTime, tolerance.time)
    holdFigure('Settling time', readings.settlingTime, figures.settlingTime, tolerance.time)
    holdFigure('Phase margin', readings.phaseMarginDeg, margins.phaseMarginDeg, tolerance.margin)
    holdFigure('Gain crossover', readings.gainCrossover, margins.gainCrossover, tolerance.margin)
    holdFigure('Upper gain margin', readings.gainMargin.upper, margins.gainMargin.upper, tolerance.margin)
    holdFigure('Lower gain margin', readings.gainMargin.lower, margins.gainMargin.lower, tolerance.margin)
    holdFigure('Sensitivity peak', readings.sensitivityPeak, margins.sensitivityPeak, tolerance.margin)
  })
})
