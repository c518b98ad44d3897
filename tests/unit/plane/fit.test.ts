import { describe, expect, it } from 'vitest'
import { fitView, interestingBounds, isAnotherLoop } from '~/utils/plane/fit'
import { isInView, toScreen } from '~/utils/plane/viewport'

const loop = (poles: number[], zeros: number[] = []) => ({
  openLoop: {
    numerator: [1], denominator: [1], poles: poles.map(re => ({ re, im: 0 })), zeros: zeros.map(re => ({ re, im: 0 })), deadTime: 0, type: 1, relativeDegree: 2,
  },
  breakaways: [],
  imaginaryAxisCrossings: [],
})
const point = { re: -1.32, im: 1.76 }

describe('the first view', () => {
  it('holds the design and leaves far poles out', () => {
    const bounds = interestingBounds(loop([0, -3, -16]), point)
    expect(bounds.left).toBe(-3)
    expect(bounds.top).toBeCloseTo(1.6 * 1.76, 12)
    expect(bounds.bottom).toBe(-bounds.top)
    expect(bounds.right).toBeGreaterThan(0)
  })

  it('shows origin, point and near poles with room around them', () => {
    const view = fitView(loop([0, -3, -16]), point, 800, 500)
    for (const mark of [{ re: 0, im: 0 }, point, { re: -3, im: 0 }]) expect(isInView(view, toScreen(view, mark), 40)).toBe(true)
  })

  it.each([[null, { re: 0, im: 0 }], [loop([]), { re: 0, im: 0 }], [loop([0, 0]), { re: -1e-6, im: 1e-6 }], [loop([0]), { re: -1e6, im: 0 }]])('is a sound view in any case %#', (analysis, designPoint) => {
    const view = fitView(analysis, designPoint, 390, 300)
    expect([view.scale, view.center.re, view.center.im].every(Number.isFinite)).toBe(true)
    expect(isInView(view, toScreen(view, designPoint))).toBe(true)
  })

  it('is taken anew for another loop, not for a pole that moved a little', () => {
    expect(isAnotherLoop(null, loop([0, -3]))).toBe(true)
    expect(isAnotherLoop(null, null)).toBe(false)
    expect(isAnotherLoop(loop([0, -3]), loop([0, -3.4]))).toBe(false)
    expect(isAnotherLoop(loop([0, -3]), loop([0, -30]))).toBe(true)
    expect(isAnotherLoop(loop([0, -3]), loop([0, -3, -16]))).toBe(true)
    expect(isAnotherLoop(loop([0, -3]), loop([0, -3], [-5]))).toBe(true)
    expect(isAnotherLoop(loop([0, 0]), loop([0, 0]))).toBe(false)
  })
})
