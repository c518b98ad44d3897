import { describe, expect, it } from 'vitest'
import { arrowHeads, drawnBranches, hoverLocus, visibleBranches } from '~/utils/plane/locus'
import type { LoopAnalysis } from '#shared/control/types'
import type { Viewport } from '~/utils/plane/viewport'

/** 100 px per rad/s, origin at (300, 200). */
const viewport: Viewport = { center: { re: 0, im: 0 }, scale: 100, width: 600, height: 400 }
const branch = { points: [[0, 0, 0], [-1, 0, 1], [-1, 1, 4]] as [number, number, number][] }

describe('hovering the locus', () => {
  it('tells the gain between nodes: linear from a pole, geometric further on', () => {
    expect(hoverLocus([branch], viewport, { x: 250, y: 205 }, 10)).toEqual({ point: { re: -0.5, im: 0 }, gain: 0.5, distance: 5 })
    const further = hoverLocus([branch], viewport, { x: 196, y: 150 }, 10)!
    expect(further.point).toEqual({ re: -1, im: 0.5 })
    expect(further.gain).toBeCloseTo(2, 12)
    expect(further.distance).toBe(4)
  })

  it('takes the nearest branch and none out of reach', () => {
    const other = { points: [[0, 0.06, 7], [-1, 0.06, 7]] as [number, number, number][] }
    expect(hoverLocus([branch, other], viewport, { x: 250, y: 195 }, 10)!.gain).toBe(7)
    expect(hoverLocus([branch, other], viewport, { x: 250, y: 216 }, 10)).toBeNull()
    expect(hoverLocus([], viewport, { x: 250, y: 200 }, 10)).toBeNull()
  })

  it('copes with repeated nodes', () => {
    const still = { points: [[-1, 0, 2], [-1, 0, 3]] as [number, number, number][] }
    expect(hoverLocus([still], viewport, { x: 200, y: 200 }, 10)).toEqual({ point: { re: -1, im: 0 }, gain: 2, distance: 0 })
  })
})

describe('drawing the locus', () => {
  it('runs on along the asymptotes, and ends where a zero is', () => {
    const places = (...list: number[]) => list.map(re => ({ re, im: 0 }))
    const openLoop = { poles: places(-1, -2, 0), zeros: places(-3, 0) } as LoopAnalysis['openLoop']
    const outward = { points: [[-1, 0, 0], [-1, 8, 1], [-1, 16, 2]] as [number, number, number][] }
    const toZero = { points: [[-2, 0, 0], [-2.9, 0, 50], [-2.9999, 0, 1e4]] as [number, number, number][] }
    const toOrigin = { points: [[-1, 0, 0], [-1e-4, 0, 1e4]] as [number, number, number][] }
    const hidden = { points: [[0, 0, 0], [0, 0, 1e4]] as [number, number, number][] }
    const [first, ...others] = drawnBranches({ branches: [outward, toZero, toOrigin, hidden], openLoop })
    expect(first!.points.slice(0, 3)).toEqual(outward.points)
    expect(first!.points[3]![0]).toBe(-1)
    expect(first!.points[3]![1]).toBeGreaterThan(10_000)
    expect(others).toEqual([toZero, toOrigin, hidden])
  })

  it('cuts branches at the frame', () => {
    const far = { points: [[0, 0, 0], [-1000, 0, 5]] as [number, number, number][] }
    expect(visibleBranches([far], viewport, { left: 0, top: 0, right: 600, bottom: 400 })).toEqual([[{ x: 300, y: 200 }, { x: 0, y: 200 }]])
  })

  it('points arrows the way the gain grows, spaced along a run', () => {
    expect(arrowHeads([[{ x: 0, y: 0 }, { x: 60, y: 0 }, { x: 60, y: 100 }]], 100)).toEqual([{ x: 60, y: 20, angle: Math.PI / 2 }])
    expect(arrowHeads([[{ x: 400, y: 0 }, { x: 0, y: 0 }]], 200)).toEqual([{ x: 300, y: 0, angle: Math.PI }, { x: 100, y: 0, angle: Math.PI }])
    expect(arrowHeads([[{ x: 0, y: 0 }, { x: 30, y: 0 }]], 100)).toEqual([])
    expect(arrowHeads([[{ x: 0, y: 0 }, { x: 0, y: 0 }]], 100)).toEqual([])
  })
})
