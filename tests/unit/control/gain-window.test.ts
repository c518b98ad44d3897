import { describe, expect, it } from 'vitest'
import { gainWindow } from '#shared/control/gain-window'
import { scaleGains } from '#shared/control/scale-gains'
import { solveDesign } from '#shared/control/solve'
import type { Requirement } from '#shared/control/types'
import { loopOf } from '../../helpers/loops'
import { randomLoop } from '../../helpers/random-loop'
import { seededRandom } from '../../helpers/random'

const overshoot = (value: number): Requirement => ({ reading: 'overshootPercent', limit: 'at-most', value })

describe('the gain window', () => {
  it('of a second-order loop ends where the textbook relation puts the overshoot', () => {
    // K/(s(s + 2)) has damping ratio 1/sqrt(K); 10 % overshoot belongs to ln(10)/sqrt(pi² + ln(10)²).
    const zeta = Math.log(10) / Math.hypot(Math.PI, Math.log(10))
    const { window, byRequirement, tightest } = gainWindow(loopOf([1], [1, 2, 0]), { form: 'gain' }, { k: 2 }, [overshoot(10)])
    expect(window).toEqual([[1e-3, expect.closeTo(1 / zeta ** 2 / 2, 5)]])
    expect(Math.abs(window[0]![1] * 2 * zeta ** 2 - 1)).toBeLessThan(1e-6)
    expect(byRequirement).toEqual([{ ...overshoot(10), intervals: window }])
    expect(tightest).toEqual({ below: null, above: 'overshootPercent' })
  })

  it('of a conditionally stable loop ends at the gains of Routh, and names what ends it on each side', () => {
    // s³ + K (s + 1)²: Routh asks for K > 1/2; the effort just after the step is K.
    const margin: Requirement = { reading: 'phaseMarginDeg', limit: 'at-least', value: 0 }
    const { window, tightest } = gainWindow(loopOf([1, 2, 1], [1, 0, 0, 0]), { form: 'gain' }, { k: 2 }, [margin, { reading: 'peakEffort', limit: 'at-most', value: 10 }])
    expect(Math.abs(window[0]![0] / 0.25 - 1)).toBeLessThan(2e-6)
    expect(Math.abs(window[0]![1] / 5 - 1)).toBeLessThan(2e-6)
    expect(tightest).toEqual({ below: 'phaseMarginDeg', above: 'peakEffort' })
  })

  it('is empty where requirements exclude one another, and whole where nothing is asked', () => {
    const plant = loopOf([1], [1, 2, 0])
    const { window, tightest } = gainWindow(plant, { form: 'gain' }, { k: 2 }, [overshoot(1), { reading: 'riseTime', limit: 'at-most', value: 0.2 }])
    expect(window).toEqual([])
    expect(tightest).toEqual({ below: null, above: null })
    expect(gainWindow(plant, { form: 'gain' }, { k: 2 }, []).window).toEqual([[1e-3, 1e3]])
  })

  it('multiplies every free gain and leaves places alone', () => {
    expect(scaleGains({ kp: 2, ki: 3, kd: 4 }, 2)).toEqual({ kp: 4, ki: 6, kd: 8 })
    expect(scaleGains({ k: 5, zero: -1, pole: -10 }, 2)).toEqual({ k: 10, zero: -1, pole: -10 })
  })

  it('agrees with the verdicts at gains drawn at random, near its edges too', () => {
    const random = seededRandom(77)
    for (let round = 0; round < 40; round++) {
      const model = { plant: randomLoop(random, 2 + Math.floor(random() * 4)), rateFeedback: 0 }
      const requirements: Requirement[] = [overshoot(20), { reading: 'phaseMarginDeg', limit: 'at-least', value: 40 }, { reading: 'sensitivityPeak', limit: 'at-most', value: 2 }]
      const gains = { k: Math.exp(2 * random() - 1) }
      const { byRequirement } = gainWindow(model, { form: 'gain' }, gains, requirements)
      const edges = byRequirement.flatMap(({ intervals }) => intervals.flat())
      const factors = [...Array.from({ length: 12 }, () => Math.exp(8 * random() - 4)), ...edges.flatMap(edge => [edge * (1 - 1e-4), edge * (1 + 1e-4)])]
      for (const factor of factors.filter(f => f > 1e-3 && f < 1e3 && edges.every(edge => Math.abs(f / edge - 1) > 1e-5))) {
        let verdicts
        try {
          verdicts = solveDesign(model, { form: 'gain' }, { gains: scaleGains(gains, factor) }, { requirements }).verdicts
        } catch {
          continue
        }
        verdicts.forEach(({ met }, n) => {
          const inside = byRequirement[n]!.intervals.some(([from, to]) => factor >= from && factor <= to)
          expect(inside, `${requirements[n]!.reading} at ${factor} in round ${round}`).toBe(met)
        })
      }
    }
  })
})
