import { describe, expect, it } from 'vitest'
import { freePoint, gripPosition, meetingsOnRay, pointOnRay, projectToRay, rayAngle, visibleRay } from '~/utils/plane/ray'
import type { Viewport } from '~/utils/plane/viewport'

const viewport: Viewport = { center: { re: 0, im: 0 }, scale: 100, width: 600, height: 400 }
const diagonal = 0.75 * Math.PI

describe('ray', () => {
  it('tells a ray by its angle, the same for a point and its conjugate', () => {
    expect(rayAngle({ re: -1, im: 1 })).toBe(diagonal)
    expect(rayAngle({ re: -1, im: -1 })).toBe(diagonal)
    expect(rayAngle({ re: -3, im: -0 })).toBe(Math.PI)
  })

  it('is exactly real on the negative real axis', () => {
    expect(pointOnRay(Math.PI, 2)).toEqual({ re: -2, im: 0 })
    expect(pointOnRay(Math.PI / 2, 2).im).toBe(2)
  })

  it('projects at a right angle and stops before the origin', () => {
    const foot = projectToRay({ re: -2, im: 0 }, diagonal, 0.01)
    expect(foot.re).toBeCloseTo(-1, 12)
    expect(foot.im).toBeCloseTo(1, 12)
    const stopped = projectToRay({ re: 5, im: -5 }, diagonal, 0.01)
    expect(Math.hypot(stopped.re, stopped.im)).toBeCloseTo(0.01, 12)
    expect(rayAngle(stopped)).toBeCloseTo(diagonal, 12)
  })

  it('keeps a free point in the upper half plane and off the origin', () => {
    expect(freePoint({ re: -1, im: -2 }, 0.1)).toEqual({ re: -1, im: 0 })
    expect(freePoint({ re: 0.5, im: 0.5 }, 0.1)).toEqual({ re: 0.5, im: 0.5 })
    expect(freePoint({ re: 0, im: 0.01 }, 0.1)).toEqual({ re: expect.closeTo(0, 12), im: 0.1 })
  })

  it('clips the ray to the view', () => {
    const [inner, outer] = visibleRay(viewport, diagonal)!
    expect(inner).toEqual({ x: 300, y: 200 })
    expect(outer.x).toBeCloseTo(100, 9)
    expect(outer.y).toBeCloseTo(0, 9)
    expect(visibleRay({ ...viewport, center: { re: 50, im: 0 } }, diagonal)).toBeNull()
  })

  it('puts the grip at the outer end, further in when the point is there, nowhere when the ray is out of view', () => {
    const far = gripPosition(viewport, { re: -0.5, im: 0.5 })!
    expect(far.x).toBeCloseTo(130, 9)
    expect(far.y).toBeCloseTo(30, 9)
    const near = gripPosition(viewport, { re: -1.7, im: 1.7 })!
    expect(Math.hypot(near.x - 130, near.y - 30)).toBeCloseTo(60, 9)
    expect(near.x).toBeGreaterThan(130)
    expect(gripPosition({ ...viewport, center: { re: 50, im: 0 } }, { re: -1, im: 1 })).toBeNull()
  })

  it('takes as meetings only those of this very ray', () => {
    const on = { point: { re: -2, im: 2 }, gain: 3 }
    expect(meetingsOnRay([on, { point: { re: -2, im: 2.001 }, gain: 4 }], diagonal)).toEqual([on])
    expect(meetingsOnRay(undefined, diagonal)).toEqual([])
  })
})
