import { describe, expect, it } from 'vitest'
import { niceStep } from '~/utils/nice-step'
import { decimalsOf, formatImaginaryMark, formatMark, gridStep, scaleMarks } from '~/utils/plane/scale'

describe('scale', () => {
  it.each([[0.2, 0.2], [0.21, 0.5], [0.51, 1], [1, 1], [1.01, 2], [3, 5], [7, 10], [2e-6, 2e-6], [3e-7, 5e-7], [4e5, 5e5]])('nice step for %d is %d', (least, step) => {
    expect(niceStep(least)).toBe(step)
  })

  it('lists multiples without accumulated rounding', () => {
    expect(scaleMarks(-0.3, 0.3, 0.1)).toEqual([-3 * 0.1, -0.2, -0.1, 0, 0.1, 0.2, 3 * 0.1])
    expect(scaleMarks(1.2, 1.8, 1)).toEqual([])
    expect(Object.is(scaleMarks(-1, 1, 1)[1], 0)).toBe(true)
  })

  it('never lists more than a thousand', () => {
    expect(scaleMarks(0, 1e9, 1)).toHaveLength(1000)
  })

  it.each([[1, 0], [0.5, 1], [0.02, 2], [1e-6, 6], [20, 0]])('step %d has %d decimals', (step, decimals) => {
    expect(decimalsOf(step)).toBe(decimals)
  })

  it.each([
    [0, 1, '0'], [-2, 1, '−2'], [-2, 0.5, '−2'], [2.5, 0.5, '2.5'], [0.30000000000000004, 0.1, '0.3'], [20, 10, '20'],
    [200000, 100000, '2e5'], [-1200000, 100000, '−1.2e6'], [2e-6, 1e-6, '2e−6'], [1e-5, 2e-6, '1e−5'], [1.2e-5, 2e-6, '1.2e−5'],
  ])('writes %d on a scale of %d as %s', (value, step, words) => {
    expect(formatMark(value, step)).toBe(words)
  })

  it.each([[1, 1, 'j'], [-1, 1, '−j'], [2, 1, '2j'], [-0.5, 0.5, '−0.5j'], [0, 1, '0'], [1e5, 1e5, '1e5j']])('writes %d j on a scale of %d as %s', (value, step, words) => {
    expect(formatImaginaryMark(value, step)).toBe(words)
  })

  it('widens the grid until the longest label has room', () => {
    const narrow = gridStep({ from: -10, to: 10 }, 100, 60, () => 10)
    expect(narrow).toBe(1)
    expect(gridStep({ from: -10, to: 10 }, 100, 60, () => 150)).toBe(2)
    expect(gridStep({ from: -10, to: 10 }, 100, 60, label => label.length * 100)).toBe(5)
  })

  it('keeps grid lines between 60 px and 5 times that at any zoom', () => {
    for (let exponent = -4; exponent <= 10; exponent += 0.13) {
      const scale = 10 ** exponent
      const pixels = gridStep({ from: -500 / scale, to: 500 / scale }, scale, 60, () => 30) * scale
      expect(pixels).toBeGreaterThan(59.99)
      expect(pixels).toBeLessThan(300)
    }
  })
})
