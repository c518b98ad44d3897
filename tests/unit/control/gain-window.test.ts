import { describe, expect, it } from 'vitest'
import { gainWindow } from '#shared/control/gain-window'
import { scaleGains } from '#shared/control/scale-gains'
import type { Requirement } from '#shared/control/types'
import { loopOf } from '../../helpers/loops'

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
})
