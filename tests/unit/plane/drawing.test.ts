import { describe, expect, it } from 'vitest'
import { seededRandom } from '../../helpers/random'
import { clipPolygon, clipPolyline, clipSegment, corners } from '~/utils/plane/clip'
import { hatchLines } from '~/utils/plane/hatch'
import { nearestRoot } from '~/utils/bench/nearest-root'
import { gatherMarks } from '~/utils/plane/marks'
import { drawRegion, forbiddenRegions } from '~/utils/plane/regions'
import type { Viewport } from '~/utils/plane/viewport'

const rect = { left: 0, top: 0, right: 100, bottom: 50 }

describe('clipping', () => {
  it('keeps, cuts and drops segments', () => {
    expect(clipSegment({ x: 10, y: 10 }, { x: 20, y: 20 }, rect)).toEqual([{ x: 10, y: 10 }, { x: 20, y: 20 }])
    expect(clipSegment({ x: -100, y: 25 }, { x: 300, y: 25 }, rect)).toEqual([{ x: 0, y: 25 }, { x: 100, y: 25 }])
    expect(clipSegment({ x: -10, y: 10 }, { x: 10, y: -11 }, rect)).toBeNull()
    expect(clipSegment({ x: 10, y: 60 }, { x: 90, y: 60 }, rect)).toBeNull()
    expect(clipSegment({ x: NaN, y: 10 }, { x: 90, y: 10 }, rect)).toBeNull()
  })

  it('returns parts of the segment that lie inside, for random segments', () => {
    const random = seededRandom(11)
    for (let n = 0; n < 500; n++) {
      const place = () => ({ x: 300 * random() - 100, y: 200 * random() - 75 })
      const [a, b] = [place(), place()]
      for (const { x, y } of clipSegment(a, b, rect) ?? []) {
        expect(x).toBeGreaterThan(-1e-9)
        expect(x).toBeLessThan(100 + 1e-9)
        expect(y).toBeGreaterThan(-1e-9)
        expect(y).toBeLessThan(50 + 1e-9)
        expect(Math.abs((x - a.x) * (b.y - a.y) - (y - a.y) * (b.x - a.x))).toBeLessThan(1e-6)
      }
    }
  })

  it('cuts a polyline into its visible runs', () => {
    const runs = clipPolyline([{ x: -10, y: 10 }, { x: 10, y: 10 }, { x: 20, y: 10 }, { x: 20, y: -10 }, { x: 40, y: -10 }, { x: 40, y: 10 }], rect)
    expect(runs).toEqual([
      [{ x: 0, y: 10 }, { x: 10, y: 10 }, { x: 20, y: 10 }, { x: 20, y: 0 }],
      [{ x: 40, y: 0 }, { x: 40, y: 10 }],
    ])
    expect(clipPolyline([], rect)).toEqual([])
    expect(clipPolyline([{ x: 1, y: 1 }], rect)).toEqual([])
  })

  it('cuts a polygon by a half plane', () => {
    expect(clipPolygon(corners(rect), { a: 1, b: 0, c: -60 })).toEqual([{ x: 60, y: 0 }, { x: 100, y: 0 }, { x: 100, y: 50 }, { x: 60, y: 50 }])
    expect(clipPolygon(corners(rect), { a: 1, b: 0, c: -100.5 })).toEqual([])
  })
})

describe('hatching', () => {
  it('draws parallel lines at 45 degrees, counted from the anchor, from edge to edge', () => {
    const square = corners({ left: 0, top: 0, right: 40, bottom: 40 })
    const lines = hatchLines(square, 10 / Math.SQRT2, 'rising', { x: 5, y: 0 })
    expect(lines.map(([a, b]) => [a.x + a.y, b.x + b.y])).toEqual([5, 15, 25, 35, 45, 55, 65, 75].map(sum => [expect.closeTo(sum, 9), expect.closeTo(sum, 9)]))
    const falling = hatchLines(square, 10 / Math.SQRT2, 'falling', { x: 0, y: 5 })
    expect(falling).toHaveLength(8)
    for (const [a, b] of falling) expect(a.x - a.y).toBeCloseTo(b.x - b.y, 9)
  })

  it('draws nothing where there is nothing', () => {
    expect(hatchLines([], 8, 'rising', { x: 0, y: 0 })).toEqual([])
    expect(hatchLines([{ x: 0, y: 0 }, { x: 1, y: 1 }], 8, 'rising', { x: 0, y: 0 })).toEqual([])
  })
})

describe('forbidden regions', () => {
  /** 100 px per rad/s, origin in the middle. */
  const viewport: Viewport = { center: { re: 0, im: 0 }, scale: 100, width: 600, height: 400 }
  const area = (polygon: { x: number, y: number }[]) => Math.abs(polygon.reduce((sum, { x, y }, n) => {
    const next = polygon[(n + 1) % polygon.length]!
    return sum + x * next.y - y * next.x
  }, 0)) / 2

  it('come from overshoot, damping ratio and settling time alone, upright edges first', () => {
    expect(forbiddenRegions([
      { reading: 'phaseMarginDeg', limit: 'at-least', value: 50 },
      { reading: 'overshootPercent', limit: 'at-most', value: 16.303353482158048 },
      { reading: 'settlingTime', limit: 'at-most', value: 4 },
      { reading: 'dampingRatio', limit: 'at-least', value: 0.6 },
    ])).toEqual([
      { kind: 'decay', edge: -1, forbids: 'slower', labels: ['settles within 4 s by rule of thumb', 'settles within 4 s'] },
      { kind: 'damping', dampingRatio: expect.closeTo(0.5, 12), forbids: 'less', labels: ['overshoot at most 16.3 % if second order', 'overshoot at most 16.3 %'] },
      { kind: 'damping', dampingRatio: 0.6, forbids: 'less', labels: ['damping ratio at least 0.6'] },
    ])
  })

  it('are none for values that no point of the plane stands for', () => {
    expect(forbiddenRegions([
      { reading: 'overshootPercent', limit: 'at-most', value: 101 },
      { reading: 'overshootPercent', limit: 'at-most', value: -1 },
      { reading: 'settlingTime', limit: 'at-most', value: 0 },
      { reading: 'dampingRatio', limit: 'at-least', value: 2 },
    ])).toEqual([])
  })

  it('forbid what settles too slowly', () => {
    const [region] = forbiddenRegions([{ reading: 'settlingTime', limit: 'at-most', value: 4 }])
    const drawing = drawRegion(region!, viewport)
    expect(drawing.polygons).toEqual([[{ x: 200, y: 0 }, { x: 600, y: 0 }, { x: 600, y: 400 }, { x: 200, y: 400 }]])
    expect(drawing.edges).toEqual([[{ x: 200, y: 400 }, { x: 200, y: 0 }]])
    expect(drawRegion(region!, { ...viewport, center: { re: -10, im: 0 } }).polygons).toEqual([])
  })

  it('forbid what is damped too little: everything outside the wedge', () => {
    const drawing = drawRegion({ kind: 'damping', dampingRatio: Math.SQRT1_2, forbids: 'less', labels: [] }, viewport)
    // The wedge of 45 degrees about the negative real axis: in this view two trapezia of 200 px height, 300 and 100 px wide.
    expect(drawing.polygons.map(area)).toEqual([expect.closeTo(600 * 200 - 40_000, 6), expect.closeTo(600 * 200 - 40_000, 6)])
    const wedge = drawRegion({ kind: 'damping', dampingRatio: Math.SQRT1_2, forbids: 'more', labels: [] }, viewport)
    expect(wedge.polygons.map(area)).toEqual([expect.closeTo(40_000, 6), expect.closeTo(40_000, 6)])
  })

  it.each([0, -0.5, 1])('are exact for a damping ratio of %d', (dampingRatio) => {
    const drawing = drawRegion({ kind: 'damping', dampingRatio, forbids: 'less', labels: [] }, viewport)
    const half = { '0': 60_000, '-0.5': 60_000 - 200 * 200 / Math.tan(Math.PI / 3) / 2, '1': 120_000 }[String(dampingRatio)]!
    expect(drawing.polygons.map(area)).toEqual([expect.closeTo(half, 6), expect.closeTo(half, 6)])
  })
})

describe('marks', () => {
  it('gather clusters of a multiple root and keep neighbours apart', () => {
    expect(gatherMarks([{ re: 0, im: 0 }, { re: 0, im: 0 }, { re: -1, im: 0 }, { re: -1.000001, im: 1e-6 }, { re: -1.001, im: 0 }])).toEqual([
      { point: { re: 0, im: 0 }, multiplicity: 2 }, { point: { re: -1, im: 0 }, multiplicity: 2 }, { point: { re: -1.001, im: 0 }, multiplicity: 1 },
    ])
    expect(gatherMarks([])).toEqual([])
  })

  it('find the nearest', () => {
    expect(nearestRoot([{ re: 0, im: 0 }, { re: 2, im: 1 }], { re: 1.5, im: 0 })).toEqual({ re: 2, im: 1 })
    expect(nearestRoot([], { re: 0, im: 0 })).toBeNull()
  })
})
