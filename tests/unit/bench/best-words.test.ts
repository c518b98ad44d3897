import { describe, expect, it } from 'vitest'
import type { BestPoint, Candidate } from '#shared/control/best-point/types'
import { describePoint, pointFromDamping } from '#shared/control/design-point'
import { sayBest } from '~/utils/bench/best-words'

const met = { reading: 'overshootPercent', limit: 'at-most', value: 12, actual: 11.9, met: true } as const
const broken = { reading: 'settlingTime', limit: 'at-most', value: 7, actual: 8.123, met: false } as const

function candidate(change: Partial<Candidate> = {}): Candidate {
  return { designPoint: describePoint(pointFromDamping(0.6, 2)), gains: { k: 3 }, settlingTime: 4, verdicts: [met], ...change }
}

function say(change: Partial<BestPoint>): string {
  const result: BestPoint = {
    over: 'plane', best: candidate(), binding: [], tied: false, closest: null, hindrance: null, settlingTimeBefore: 5, places: null, evaluations: 99, cutShort: null, ...change,
  }
  return sayBest(result).join(' ').replaceAll('\u00A0', ' ')
}

describe('what a search found, in words', () => {
  it('is how fast, where, and what stops the point', () => {
    expect(say({ binding: ['overshootPercent'] })).toBe('Settles in 4.00 s instead of 5.00 s: damping ratio 0.600, 2.00 rad/s. Overshoot stops you there.')
    expect(say({ binding: ['overshootPercent', 'phaseMarginDeg', 'border'], settlingTimeBefore: null })).toBe(
      'Settles in 4.00 s: damping ratio 0.600, 2.00 rad/s. Overshoot and phase margin stop you there. It lies at the border of the search: beyond it there may be faster points.',
    )
    expect(say({ over: 'ray', settlingTimeBefore: 4 })).toMatch(/^No point on this ray settles sooner than in 4.00 s, as it does now. No requirement stops you there/)
  })

  it('says that nothing but the loop limits it where nothing is required', () => {
    const best = candidate({ verdicts: [] })
    expect(say({ best })).toMatch(/Nothing is required: the loop itself is the limit\.$/)
    expect(say({ best, binding: ['border'] })).toMatch(/Nothing is required\. It lies at the border/)
    expect(say({ best, binding: ['negative-gain'] })).toMatch(/Faster points ask for a negative gain\.$/)
  })

  it('counts the places where a ray meets the locus', () => {
    expect(say({ places: 1 })).toMatch(/It is the only place where this ray meets the locus\.$/)
    expect(say({ places: 2 })).toMatch(/It is one of 2 places where this ray meets the locus, and the fastest\.$/)
    expect(say({ places: 3, binding: ['peakEffort'] })).toMatch(/one of 3 places where this ray meets the locus: peak effort stops you at faster ones\.$/)
  })

  it('names what the closest point breaks, and why there is none', () => {
    const closest = candidate({ verdicts: [met, broken] })
    expect(say({ over: 'ray', best: null, closest })).toBe(
      'No point on this ray meets every requirement. The closest breaks settling time (8.123 s, at most 7 s): damping ratio 0.600, 2.00 rad/s.',
    )
    const none = (hindrance: BestPoint['hindrance']) => say({ best: null, hindrance })
    expect(none({ kind: 'unstable' })).toBe('No point in the plane is stable within the search.')
    expect(none({ kind: 'negative-gain' })).toBe('Every stable point in the plane asks for a negative gain.')
    expect(none({ kind: 'unsettled' })).toBe('The response ends at 0, so that no point has a settling time to compare.')
    expect(none({ kind: 'unreachable', message: 'a lead only adds phase' })).toBe('This controller reaches no point in the plane: a lead only adds phase.')
  })

  it('says when others are as fast and when the search was cut short', () => {
    expect(say({ tied: true, cutShort: 'time' })).toMatch(/Other points settle just as fast\. The search took too long and was cut short: there may be a faster point\.$/)
  })
})
