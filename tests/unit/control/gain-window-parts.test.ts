import { describe, expect, it } from 'vitest'
import { gainWindow } from '#shared/control/gain-window'
import { solveDesign } from '#shared/control/solve'
import type { LoopModel, Requirement } from '#shared/control/types'

/** A slew axis: kt/(s (J s + b)(tau s + 1)). */
const plant = { numerator: [8], denominator: [8e-5, 0.0212, 0.3, 0] }
const requirements: Requirement[] = [
  { reading: 'overshootPercent', limit: 'at-most', value: 10 }, { reading: 'settlingTime', limit: 'at-most', value: 1 }, { reading: 'phaseMarginDeg', limit: 'at-least', value: 45 },
]

describe('the room for the gain of a real axis', () => {
  it.each<[string, Partial<LoopModel>]>([
    ['with dead time', { deadTime: 0.003 }],
    ['with a limit', { actuatorLimit: 2 }],
    ['sampled, with computing delay', { sampling: { period: 0.001, computingDelay: true } }],
    ['with all of them', { deadTime: 0.0011, actuatorLimit: 2, sampling: { period: 0.00025, computingDelay: true } }],
  ])('%s ends where its verdicts change', (_what, part) => {
    const model: LoopModel = { plant, rateFeedback: 0, ...part }
    const { window: [room, ...others] } = gainWindow(model, { form: 'gain' }, { k: 0.2 }, requirements)
    expect(others).toEqual([])
    const unmet = (factor: number) => solveDesign(model, { form: 'gain' }, { gains: { k: 0.2 * factor } }, { requirements }).unmet
    const [from, to] = room!
    expect([unmet(from * (1 + 1e-5)), unmet(Math.sqrt(from * to)), unmet(to * (1 - 1e-5))]).toEqual([0, 0, 0])
    expect(unmet(from * (1 - 1e-5))).toBe(1)
    expect(unmet(to * (1 + 1e-5))).toBeGreaterThan(0)
  })

  it('takes the height of the step into account, against which the limit stands', () => {
    const model: LoopModel = { plant, rateFeedback: 0, actuatorLimit: 0.3 }
    const effort: Requirement[] = [{ reading: 'peakEffort', limit: 'at-most', value: 0.1 }]
    const [[, to]] = gainWindow(model, { form: 'gain' }, { k: 0.2 }, effort, { amplitude: 2, settlingBandPercent: 2 }).window as [[number, number]]
    expect(0.2 * to * 2).toBeCloseTo(0.1, 6)
  })
})
