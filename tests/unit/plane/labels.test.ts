import { describe, expect, it } from 'vitest'
import { formatAngle, formatNumber, formatPoint, placeAlong, placeLabel, placesAlong } from '~/utils/plane/labels'

describe('label words', () => {
  it.each([[1.977, '1.98'], [-0.0004, '−4.00e−4'], [123456, '1.23e5'], [12345, '12345'], [0, '0'], [0.05, '0.0500'], [NaN, '—'], [Infinity, '—']])('%d reads %s', (value, words) => {
    expect(formatNumber(value)).toBe(words)
  })

  it('keeps the decimals of a given size, and no minus before zero', () => {
    expect(formatNumber(0.6, 3, 0.5)).toBe('0.600')
    expect(formatNumber(-0.0001, 3, 1)).toBe('0.00')
  })

  it.each([[{ re: -1.32, im: 1.76 }, '−1.32 + 1.76j'], [{ re: 0, im: 12.5 }, '0.0 + 12.5j'], [{ re: -3, im: 0 }, '−3.00'], [{ re: -2e-6, im: 1e-6 }, '−2.00e−6 + 1.00e−6j'], [{ re: 1, im: -2 }, '1.00 − 2.00j']])('%j reads %s', (point, words) => {
    expect(formatPoint(point)).toBe(words)
  })

  it.each([[-29.53, '−29.5°'], [123.4, '123°'], [0.8449, '0.84°'], [-0.04, '−0.04°'], [0.001, 'under 0.01°'], [0, '0.00°']])('an angle of %d reads %s', (degrees, words) => {
    expect(formatAngle(degrees)).toBe(words)
  })
})

describe('label places', () => {
  const size = { width: 100, height: 30 }
  const frame = { width: 600, height: 400 }

  it('is left of the mark unless that covers something or leaves the frame', () => {
    expect(placeLabel({ x: 300, y: 200 }, size, 20, [], frame, null)).toEqual({ index: 0, at: { x: 180, y: 185 }, align: 'right' })
    expect(placeLabel({ x: 300, y: 200 }, size, 20, [{ x: 200, y: 200 }], frame, null)).toEqual({ index: 1, at: { x: 320, y: 185 }, align: 'left' })
    expect(placeLabel({ x: 50, y: 200 }, size, 20, [], frame, null).align).toBe('left')
    expect(placeLabel({ x: 300, y: 5 }, size, 20, [], frame, null).at.y).toBeGreaterThan(0)
  })

  it('goes further away where a neighbour stands close on every side', () => {
    const around = [[-30, 0], [30, 0], [-30, -30], [30, -30], [-30, 30], [30, 30], [0, -30], [0, 30]].map(([dx = 0, dy = 0]) => ({ x: 300 + dx, y: 200 + dy }))
    expect(placeLabel({ x: 300, y: 200 }, size, 20, around, frame, null)).toEqual({ index: 8, at: { x: 152, y: 185 }, align: 'right' })
  })

  it('stays where it was until another place is clearly better', () => {
    const taken = [{ x: 200, y: 200 }]
    expect(placeLabel({ x: 300, y: 200 }, size, 20, taken, frame, 0).index).toBe(0)
    expect(placeLabel({ x: 300, y: 200 }, size, 20, [...taken, ...taken, ...taken], frame, 0).index).toBe(1)
  })

  it('samples a segment near the mark only', () => {
    expect(placesAlong({ x: 0, y: 0 }, { x: 1000, y: 0 }, { x: 100, y: 0 }, 16, 8)).toEqual([84, 92, 100, 108, 116].map(x => ({ x, y: 0 })))
    expect(placesAlong({ x: 0, y: 500 }, { x: 1000, y: 500 }, { x: 100, y: 0 }, 16)).toEqual([])
  })

  it('writes along an edge at the wanted end, clear of what is taken, never on its head', () => {
    const edge = [{ x: 0, y: 300 }, { x: 0, y: 0 }] as const
    expect(placeAlong(edge, 80, true, 'inner', [])).toEqual({ middle: { x: 0, y: 244 }, angle: -Math.PI / 2, offset: 12, covered: 0 })
    expect(placeAlong(edge, 80, true, 'outer', [])!.middle).toEqual({ x: 0, y: 56 })
    const clear = placeAlong(edge, 80, true, 'inner', [{ x: 12, y: 260 }])!
    expect(clear.covered).toBe(0)
    expect(clear.middle.y).toBeLessThan(260 - 46)
    const leftward = placeAlong([{ x: 200, y: 0 }, { x: 0, y: 0 }], 80, false, 'outer', [])!
    expect(leftward).toEqual({ middle: { x: 56, y: 0 }, angle: 2 * Math.PI, offset: 12, covered: 0 })
    expect(placeAlong(edge, 290, true, 'inner', [])).toBeNull()
  })
})
