import { describe, expect, it } from 'vitest'
import { dampingRatioOf } from '#shared/control/design-point'
import { commandOf, nextMeeting, stepAcross, stepAlong } from '~/utils/plane/keys'

const plain = { shiftKey: false, ctrlKey: false, metaKey: false, altKey: false }

describe('keys', () => {
  it.each([
    ['ArrowUp', { do: 'along', direction: 1, fine: false }],
    ['ArrowDown', { do: 'along', direction: -1, fine: false }],
    ['ArrowLeft', { do: 'across', direction: 1, fine: false }],
    ['ArrowRight', { do: 'across', direction: -1, fine: false }],
    ['+', { do: 'zoom', factor: 1.25 }], ['=', { do: 'zoom', factor: 1.25 }], ['-', { do: 'zoom', factor: 0.8 }],
    ['f', { do: 'fit' }], ['F', { do: 'fit' }], ['c', { do: 'centre' }], ['n', { do: 'meeting', direction: 1 }], ['p', { do: 'meeting', direction: -1 }],
    ['Escape', { do: 'cancel' }], ['Enter', { do: 'pin' }], ['Tab', null], ['x', null],
  ])('%s', (key, command) => {
    expect(commandOf({ key, ...plain })).toEqual(command)
  })

  it('makes fine steps with shift and leaves shortcuts of page and browser alone', () => {
    expect(commandOf({ key: 'ArrowUp', ...plain, shiftKey: true })).toEqual({ do: 'along', direction: 1, fine: true })
    for (const modifier of ['ctrlKey', 'metaKey', 'altKey']) expect(commandOf({ key: 'f', ...plain, [modifier]: true })).toBeNull()
  })

  it('steps along the ray onto round natural frequencies', () => {
    const point = { re: -1.32, im: 1.76 }
    const up = stepAlong(point, 1, false)
    expect(Math.hypot(up.re, up.im)).toBeCloseTo(2.25, 12)
    expect(dampingRatioOf(up)).toBeCloseTo(0.6, 12)
    expect(Math.hypot(...Object.values(stepAlong(up, 1, false)))).toBeCloseTo(2.3, 12)
    expect(Math.hypot(...Object.values(stepAlong(up, -1, false)))).toBeCloseTo(2.2, 12)
    expect(Math.hypot(...Object.values(stepAlong(point, -1, true)))).toBeCloseTo(2.195, 12)
  })

  it('leaves a point at the origin where it is', () => {
    const origin = { re: 0, im: 0 }
    for (const direction of [1, -1] as const) {
      expect(stepAlong(origin, direction, false)).toEqual(origin)
      expect(stepAcross(origin, direction, true)).toEqual(origin)
    }
  })

  it('never reaches the origin', () => {
    let point = { re: -1e-6, im: 0 }
    for (let n = 0; n < 2000; n++) point = stepAlong(point, -1, false)
    expect(point.re).toBeLessThan(0)
  })

  it('steps across damping ratios at the same natural frequency, from 1 down to -0.99', () => {
    const point = { re: -1.32, im: 1.76 }
    expect(dampingRatioOf(stepAcross(point, 1, false))).toBeCloseTo(0.61, 12)
    expect(dampingRatioOf(stepAcross(point, -1, true))).toBeCloseTo(0.599, 12)
    expect(dampingRatioOf(stepAcross({ re: -0.6004, im: Math.sqrt(1 - 0.6004 ** 2) }, 1, true))).toBeCloseTo(0.601, 12)
    expect(stepAcross({ re: -2, im: 0 }, 1, false)).toEqual({ re: -2, im: 0 })
    let turned = point
    for (let n = 0; n < 400; n++) turned = stepAcross(turned, -1, false)
    expect(dampingRatioOf(turned)).toBeCloseTo(-0.99, 12)
  })

  it('finds the next meeting outward and inward', () => {
    const meetings = [{ re: -1, im: 1 }, { re: -2, im: 2 }, { re: -3, im: 3 }]
    expect(nextMeeting(meetings, { re: -2, im: 2 }, 1)).toEqual({ re: -3, im: 3 })
    expect(nextMeeting(meetings, { re: -2.5, im: 2.5 }, -1)).toEqual({ re: -2, im: 2 })
    expect(nextMeeting(meetings, { re: -3, im: 3 }, 1)).toBeNull()
    expect(nextMeeting([], { re: -3, im: 3 }, 1)).toBeNull()
  })
})
