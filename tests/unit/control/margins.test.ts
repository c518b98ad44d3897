import { describe, expect, it } from 'vitest'
import { margins } from '#shared/control/frequency/margins'
import { sensitivityPeak } from '#shared/control/frequency/sensitivity'
import { evaluateLoop } from '../../helpers/loops'

describe('margins', () => {
  // k s/(s^2 + 2 s + 1): |L| is 1 at two frequencies about the resonance at 1, with angles that mirror each other.
  const resonance = { numerator: [4, 0], denominator: [1, 2, 1] }

  it('of two equally small phase margins take the sign that tells of stability', () => {
    const { stable, readings } = evaluateLoop(resonance)
    expect(stable).toBe(true)
    expect(readings.phaseMarginDeg).toBeCloseTo(120, 10)
    expect(margins(resonance, false).phaseMarginDeg).toBeCloseTo(-120, 10)
  })

  it('do not depend on the last digit there', () => {
    for (const factor of [0.1, 0.3, 3, 7, 10]) {
      const { phaseMarginDeg } = margins({ numerator: [4 * factor, 0], denominator: [1, 2 * factor, factor * factor] }, true)
      expect(phaseMarginDeg).toBeCloseTo(120, 10)
    }
  })
})

describe('the sensitivity peak', () => {
  it('at frequency 0 is that of the loop without an integrator that a zero at the origin takes away', () => {
    // L = 0.05 s (s + 1)/(s (s - 2)): L(0) = -0.025, and |S| falls from there on.
    const loop = { numerator: [0.05, 0.05, 0], denominator: [1, -2, 0] }
    expect(sensitivityPeak(loop, evaluateLoop(loop).closedLoopPoles)).toBeCloseTo(1 / 0.975, 12)
  })
})
