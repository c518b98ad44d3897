import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { gainWindow } from '#shared/control/gain-window'
import { NoAnswerError } from '#shared/control/errors'
import { scaleGains } from '#shared/control/scale-gains'
import { solveDesign } from '#shared/control/solve'
import type { Requirement, Verdict } from '#shared/control/types'
import { arbitraryLoop, loopGain } from '../helpers/arbitrary-loop'
import { holds } from '../helpers/property'

const requirements: Requirement[] = [
  { reading: 'overshootPercent', limit: 'at-most', value: 20 },
  { reading: 'phaseMarginDeg', limit: 'at-least', value: 40 },
  { reading: 'sensitivityPeak', limit: 'at-most', value: 2 },
]

/** e^-4 to e^4. */
const factor = fc.noShrink(fc.integer({ min: -400, max: 400 })).map(n => Math.exp(n / 100))

describe('the gain window', () => {
  it('agrees with the verdicts anywhere, near its edges too', () => {
    holds(77, 40, [arbitraryLoop(2, 5), loopGain, fc.array(factor, { minLength: 12, maxLength: 12 })], (plant, k, drawn) => {
      const model = { plant, rateFeedback: 0 }
      const { byRequirement } = gainWindow(model, { form: 'gain' }, { k }, requirements)
      const edges = byRequirement.flatMap(({ intervals }) => intervals.flat())
      const factors = [...drawn, ...edges.flatMap(edge => [edge * (1 - 1e-4), edge * (1 + 1e-4)])]
      for (const f of factors.filter(f => f > 1e-3 && f < 1e3 && edges.every(edge => Math.abs(f / edge - 1) > 1e-5))) {
        let verdicts: Verdict[]
        try {
          verdicts = solveDesign(model, { form: 'gain' }, { gains: scaleGains({ k }, f) }, { requirements }).verdicts
        }
        catch (error) {
          expect(error).toBeInstanceOf(NoAnswerError)
          continue
        }
        verdicts.forEach(({ met, reading }, n) => {
          const inside = byRequirement[n]!.intervals.some(([from, to]) => f >= from && f <= to)
          expect(inside, `${reading} at ${f}`).toBe(met)
        })
      }
    })
  })
})
