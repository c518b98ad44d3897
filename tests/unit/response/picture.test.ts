import { describe, expect, it } from 'vitest'
import { curvePath, valueAt, xOf, yOf, type Panel } from '~/utils/response/draw'
import { niceStep } from '~/utils/nice-step'
import { calmRange, extentOf, ticksWithin } from '~/utils/response/scale'
import { calmDuration } from '~/utils/bench/calm-duration'
import type { DesignSolution } from '#shared/control/types'
import { seededRandom } from '../../helpers/random'

const panel: Panel = { left: 50, right: 250, top: 10, bottom: 110, along: { min: 0, max: 10 }, value: { min: 0, max: 2 } }

describe('scales of the response strip', () => {
  it('takes round steps', () => {
    expect([0.03, 0.2, 1, 3.2, 70].map(niceStep)).toEqual([0.05, 0.2, 1, 5, 100])
    expect(ticksWithin({ min: -0.1, max: 1.2 }, 4)).toEqual([0, 0.5, 1])
  })

  it('stands still while the content fits and fills it, and follows when it does not', () => {
    const range = calmRange(null, { min: 0, max: 1 })
    expect(range.min).toBeLessThanOrEqual(0)
    expect(range.max).toBeGreaterThan(1)
    expect(calmRange(range, { min: 0, max: 0.8 })).toBe(range)
    expect(calmRange(range, { min: 0, max: 2 }).max).toBeGreaterThan(2)
    expect(calmRange(range, { min: 0, max: 0.2 }).max).toBeLessThan(0.5)
  })

  it('always holds its content, whatever came before', () => {
    const random = seededRandom(5)
    let range: { min: number, max: number } | null = null
    for (let i = 0; i < 500; i++) {
      const [a, b] = [(random() - 0.5) * 10 ** Math.floor(random() * 8 - 4), (random() - 0.5) * 10 ** Math.floor(random() * 8 - 4)]
      const content = { min: Math.min(a, b), max: Math.max(a, b) }
      range = calmRange(range, content)
      expect(range.min).toBeLessThanOrEqual(content.min)
      expect(range.max).toBeGreaterThanOrEqual(content.max)
    }
  })

  it('survives a flat curve and an empty one', () => {
    expect(calmRange(null, { min: 0, max: 0 })).toEqual({ min: -0.04, max: 0.08 })
    expect(extentOf([[]])).toEqual({ min: 0, max: 1 })
    expect(extentOf([[3, -1], [7]], [0])).toEqual({ min: -1, max: 7 })
  })

  it('puts curves where they belong and reads between samples', () => {
    expect([xOf(panel, 5), yOf(panel, 1)]).toEqual([150, 60])
    expect(curvePath(panel, [0, 10], [0, 1e9])).toBe('M50.0 110.0L250.0 -90.0')
    expect(valueAt([0, 1, 2], [0, 10, 30], 1.5)).toBe(20)
    expect(valueAt([0, 1, 2], [0, 10, 30], 2.5)).toBeNull()
    expect(valueAt([], [], 0)).toBeNull()
  })
})

describe('the stretch of time that is asked for', () => {
  const solution = (settlingTime: number | null, end: number) => ({
    stable: settlingTime !== null, readings: { settlingTime }, closedLoopPoles: [{ re: 0.5, im: 0 }], response: { time: [0, end] },
  }) as unknown as DesignSolution

  it('is the server’s choice at first and then kept while the settling time stays near', () => {
    const first = calmDuration(null, solution(6, 10))
    expect(first.duration).toBe(10)
    expect(calmDuration(first, solution(7, 10))).toBe(first)
    expect(calmDuration(first, solution(3, 10))).toBe(first)
  })

  it('is chosen anew when the design becomes much slower, much faster or unstable', () => {
    const first = calmDuration(null, solution(6, 10))
    for (const settling of [9, 1, null]) expect(calmDuration(first, solution(settling, 10)).duration).toBeUndefined()
    expect(calmDuration(calmDuration(first, solution(9, 10)), solution(9, 15)).duration).toBe(15)
  })
})
