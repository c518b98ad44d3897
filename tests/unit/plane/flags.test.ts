import { describe, expect, it } from 'vitest'
import { placeFlags } from '~/utils/plane/flags'
import type { Viewport } from '~/utils/plane/viewport'

const viewport: Viewport = { center: { re: 0, im: 0 }, scale: 100, width: 600, height: 400 }
const elsewhere = { re: 2, im: -1 }

describe('flags', () => {
  it('stand on their place', () => {
    const flag = { id: 'a', point: { re: -1, im: 1 } }
    expect(placeFlags([flag], viewport, elsewhere)).toEqual([{ flag, foot: { x: 200, y: 100 }, cloth: { x: 200, y: 60 } }])
  })

  it('leave the design point in sight and in reach', () => {
    const flag = { id: 'a', point: { re: -1, im: 1 } }
    // On the screen the design point stands at (195, 70), where the cloth would hang.
    const [{ cloth } = { cloth: { x: NaN, y: NaN } }] = placeFlags([flag], viewport, { re: -1.05, im: 1.3 })
    expect(cloth).toEqual({ x: 200, y: 14 })
  })

  it('never cover one another, and are left out where they are out of view', () => {
    const flags = [[-1, 1], [-1, 1], [-1.1, 1], [-1, 1.1], [2, 0], [-1, 1e20], [-1, 1e20], [5, 0]].map(([re = 0, im = 0]) => ({ point: { re, im } }))
    const placed = placeFlags(flags, viewport, elsewhere)
    expect(placed.map(({ cloth }) => cloth.y)).toEqual([60, 37, 14, expect.closeTo(-19, 9), 160])
    placed.forEach((a, index) => {
      for (const b of placed.slice(index + 1)) {
        expect(Math.abs(a.cloth.x - b.cloth.x) >= 24 || Math.abs(a.cloth.y - b.cloth.y) >= 20).toBe(true)
      }
    })
  })
})
