import { describe, expect, it } from 'vitest'
import { factor } from '#shared/control/locus/factored-loop'
import { march, type Mover } from '#shared/control/locus/march'
import { refine, scaleLoop, type ScaledLoop } from '#shared/control/locus/scaled-loop'

/** 1/((s + 1)(s + 2)): real roots until they meet at k = 1/4. */
function begin(): { loop: ScaledLoop, mover: Mover } {
  const loop = scaleLoop(factor({ numerator: [1], denominator: [1, 3, 2], deadTime: 0 }), 1)
  return { loop, mover: { ...refine(loop, 0.01, -1, 0, true)!, branch: { points: [] }, mirror: null } }
}

const rootAt = (k: number) => (-3 + Math.sqrt(1 - 4 * k)) / 2

describe('following a root', () => {
  it('takes many steps, and puts each to the account of the drawing', () => {
    const { loop, mover } = begin()
    const before = loop.allowance.moves
    const [arrived] = march(loop, [mover], 0.01, 0.2)
    expect(arrived!.re).toBeCloseTo(rootAt(0.2), 12)
    expect(mover.branch.points.length).toBeGreaterThan(5)
    expect(before - loop.allowance.moves).toBeGreaterThanOrEqual(mover.branch.points.length)
  })

  it('goes the rest of the way in one piece once the account is empty, to the true root', () => {
    const { loop, mover } = begin()
    loop.allowance.moves = 0
    const [arrived] = march(loop, [mover], 0.01, 0.02)
    expect(mover.branch.points).toHaveLength(1)
    expect(arrived!.re).toBeCloseTo(rootAt(0.02), 12)
  })
})
