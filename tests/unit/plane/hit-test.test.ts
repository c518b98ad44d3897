import { describe, expect, it } from 'vitest'
import { frequencyUnder, hitTest, nearestTick, type Targets } from '~/utils/plane/hit-test'
import { toScreen } from '~/utils/plane/viewport'

const targets: Targets = {
  viewport: { center: { re: 0, im: 0 }, scale: 100, width: 600, height: 400 },
  designPoint: { re: -1, im: 1 },
  grip: { x: 130, y: 30 },
  meetings: [{ re: -1.5, im: 1.5 }, { re: -0.2, im: 0.2 }],
}

describe('hit test', () => {
  it.each([
    ['on the point', 200, 100, 'point', 'point'],
    ['27 px away', 227, 100, 'point', 'point'],
    ['29 px away', 229, 100, 'plane', 'point'],
    ['43 px away', 243, 100, 'plane', 'plane'],
    ['on the grip', 130, 30, 'grip', 'grip'],
    ['25 px from the grip', 105, 30, 'plane', 'grip'],
  ])('%s', (_, x, y, mouse, touch) => {
    expect(hitTest({ x, y }, targets, false).kind).toBe(mouse)
    expect(hitTest({ x, y }, targets, true).kind).toBe(touch)
  })

  it('gives the nearer of point and grip', () => {
    const close = { ...targets, grip: { x: 220, y: 100 } }
    expect(hitTest({ x: 209, y: 100 }, close, false).kind).toBe('point')
    expect(hitTest({ x: 212, y: 100 }, close, false).kind).toBe('grip')
  })

  it('does without a grip', () => {
    expect(hitTest({ x: 130, y: 30 }, { ...targets, grip: null }, false)).toEqual({ kind: 'plane', tick: null })
  })

  it('names the meeting under a press', () => {
    expect(hitTest({ x: 283, y: 183 }, targets, false)).toEqual({ kind: 'plane', tick: { re: -0.2, im: 0.2 } })
    expect(nearestTick({ x: 283, y: 183 }, targets, 3)).toBeNull()
  })

  it('reads a frequency off the positive imaginary axis, near it and nowhere else', () => {
    const at = toScreen(targets.viewport, { re: 0, im: 0.5 })
    expect(frequencyUnder(targets.viewport, { x: at.x - 7, y: at.y })).toBeCloseTo(0.5, 12)
    expect(frequencyUnder(targets.viewport, { x: at.x + 9, y: at.y })).toBeNull()
    expect(frequencyUnder(targets.viewport, toScreen(targets.viewport, { re: 0, im: -0.5 }))).toBeNull()
  })
})
