/** Step responses and figures over frequency against SciPy (tests/fixtures/make-scipy-responses.py): another library, other methods, seeded loops. */
import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import type { TransferFunction } from '#shared/control/types'
import { evaluateLoop } from '../helpers/loops'

interface ScipyCase {
  kind: string
  plant: TransferFunction
  duration: number
  output: number[]
  phaseMarginDeg: number | null
  gainCrossover: number | null
  gainMarginUpper: number | null
  gainMarginLower: number | null
  sensitivityPeak: number
  bandwidth: number | null
}

const cases = JSON.parse(readFileSync(new URL('../fixtures/scipy-responses.json', import.meta.url), 'utf8')) as ScipyCase[]

/** What SciPy itself is good for here: its transfer functions are coefficients, its minimiser knows half the digits of a place and all of a value. */
const tolerance = { output: 1e-9, margin: 1e-8, peak: 1e-9 }

function expectFigure(found: number | null, wanted: number | null, relative: number, what: string): void {
  if (found === null || wanted === null) return expect(found, what).toBe(wanted)
  expect(Math.abs(found - wanted) / Math.max(Math.abs(wanted), 1e-3), `${what}: ${found} against ${wanted}`).toBeLessThan(relative)
}

describe('responses and margins against SciPy', () => {
  it.each(cases.map((one, i) => ({ name: `${i} ${one.kind}`, one })))('$name', ({ one }) => {
    const { stable, response, readings } = evaluateLoop(one.plant, { response: { duration: one.duration, samples: one.output.length } })
    expect(stable).toBe(true)
    const size = Math.max(...one.output.map(Math.abs))
    const worst = Math.max(...response.output.map((value, k) => Math.abs(value - one.output[k]!)))
    expect(worst / size).toBeLessThan(tolerance.output)
    expectFigure(readings.phaseMarginDeg, one.phaseMarginDeg, tolerance.margin, 'phase margin')
    expectFigure(readings.gainCrossover, one.gainCrossover, tolerance.margin, 'gain crossover')
    expectFigure(readings.gainMargin.upper, one.gainMarginUpper, tolerance.margin, 'upper gain margin')
    expectFigure(readings.gainMargin.lower, one.gainMarginLower, tolerance.margin, 'lower gain margin')
    expectFigure(readings.sensitivityPeak, one.sensitivityPeak, tolerance.peak, 'sensitivity peak')
    expectFigure(readings.bandwidth, one.bandwidth, tolerance.margin, 'bandwidth')
  })
})
