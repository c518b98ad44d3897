import { describe, expect, it } from 'vitest'
import { stepGesture, type Gesture, type GestureContext, type GestureEvent, type Plan } from '~/utils/plane/gestures'
import type { Viewport } from '~/utils/plane/viewport'

/** 100 px per rad/s, origin at (300, 200): the design point -1 + j stands at (200, 100), the grip at (130, 30), a meeting at (150, 50). */
const viewport: Viewport = { center: { re: 0, im: 0 }, scale: 100, width: 600, height: 400 }
const context: GestureContext = {
  viewport, designPoint: { re: -1, im: 1 }, grip: { x: 130, y: 30 }, meetings: [{ re: -1.5, im: 1.5 }], pinning: false,
}
const idle: Gesture = { kind: 'idle' }

/** Plays events; the context follows moves and views, as the plane does. */
function play(events: GestureEvent[], start = context): { gesture: Gesture, plans: Plan[], context: GestureContext } {
  let gesture = idle
  let now = start
  const plans: Plan[] = []
  for (const event of events) {
    const step = stepGesture(gesture, event, now)
    gesture = step.gesture
    plans.push(...step.plans)
    for (const plan of step.plans) {
      if (plan.do === 'move') now = { ...now, designPoint: plan.point }
      if (plan.do === 'view') now = { ...now, viewport: plan.viewport }
    }
  }
  return { gesture, plans, context: now }
}

const press = (x: number, y: number, pointer = 1, touch = false): GestureEvent => ({ kind: 'press', pointer, at: { x, y }, touch })
const drag = (x: number, y: number, pointer = 1, free = false): GestureEvent => ({ kind: 'drag', pointer, at: { x, y }, free })
const release = (x: number, y: number, pointer = 1): GestureEvent => ({ kind: 'release', pointer, at: { x, y } })
const cancel: GestureEvent = { kind: 'cancel' }
const deeds = (plans: Plan[]) => plans.map(plan => plan.do)

describe('dragging the point', () => {
  it('starts only after movement, moves along the ray by what the hand moves, and ends', () => {
    const { plans, gesture } = play([press(210, 105), drag(211, 105), drag(235, 130), release(235, 130)])
    expect(deeds(plans)).toEqual(['start', 'move', 'end'])
    expect(plans[1]).toEqual({ do: 'move', point: { re: expect.closeTo(-0.75, 12), im: expect.closeTo(0.75, 12) }, snapped: false })
    expect(gesture).toEqual(idle)
  })

  it('does not jump to the pointer: the offset of the press is kept', () => {
    const { plans } = play([press(215, 115), drag(225, 125)])
    expect(plans[1]).toMatchObject({ point: { re: expect.closeTo(-0.9, 12), im: expect.closeTo(0.9, 12) } })
  })

  it('projects a pointer that leaves the ray', () => {
    const { plans } = play([press(200, 100), drag(200, 200)])
    expect(plans[1]).toMatchObject({ point: { re: expect.closeTo(-0.5, 12), im: expect.closeTo(0.5, 12) } })
  })

  it('snaps to a meeting within 8 px, to the very point, and lets go beyond', () => {
    const { plans } = play([press(200, 100), drag(155, 55), drag(157, 57)])
    expect(plans[1]).toEqual({ do: 'move', point: { re: -1.5, im: 1.5 }, snapped: true })
    expect(plans[2]).toMatchObject({ snapped: false, point: { re: expect.closeTo(-1.43, 12) } })
  })

  it('follows freely with the modifier, stays in the upper half plane, and keeps to its new ray afterwards', () => {
    const { plans } = play([press(200, 100), drag(100, 150, 1, true), drag(100, 250, 1, true), drag(50, 100)])
    expect(plans[1]).toEqual({ do: 'move', point: { re: -2, im: 0.5 }, snapped: false })
    expect(plans[2]).toEqual({ do: 'move', point: { re: -2, im: 0 }, snapped: false })
    expect(plans[3]).toEqual({ do: 'move', point: { re: -2.5, im: 0 }, snapped: false })
  })

  it('returns to where it began on cancel, once it has moved', () => {
    expect(play([press(200, 100), drag(150, 130), cancel]).plans.at(-1)).toEqual({ do: 'cancel', point: { re: -1, im: 1 } })
    expect(play([press(200, 100), cancel])).toMatchObject({ plans: [], gesture: idle })
  })

  it('does nothing on a click', () => {
    expect(play([press(200, 100), release(200, 100)]).plans).toEqual([])
  })

  it('ignores other pointers', () => {
    expect(deeds(play([press(200, 100), drag(100, 100, 2), release(100, 100, 2), drag(150, 50)]).plans)).toEqual(['start', 'move'])
  })
})

describe('turning the ray', () => {
  it('keeps the natural frequency', () => {
    const { plans } = play([press(130, 30), drag(300, 30), release(300, 30)])
    expect(deeds(plans)).toEqual(['start', 'move', 'end'])
    expect(plans[1]).toMatchObject({ point: { re: expect.closeTo(0, 12), im: expect.closeTo(Math.SQRT2, 12) } })
  })

  it('stops at the negative real axis, also when the hand goes below it', () => {
    const { plans } = play([press(130, 30), drag(100, 260), drag(250, 390)])
    expect(plans[1]).toMatchObject({ point: { re: -Math.hypot(1, 1), im: 0 } })
    expect(plans[2]).toMatchObject({ point: { im: 0 } })
  })

  it('returns on cancel', () => {
    expect(play([press(130, 30), drag(200, 30), cancel]).plans.at(-1)).toEqual({ do: 'cancel', point: { re: -1, im: 1 } })
  })
})

describe('clicks', () => {
  it('go to a meeting', () => {
    expect(play([press(152, 48), release(152, 48)]).plans).toEqual([{ do: 'jump', point: { re: -1.5, im: 1.5 } }])
  })

  it('bring a point that stands beside a meeting onto it', () => {
    const beside = { ...context, designPoint: { re: -1.501, im: 1.499 } }
    expect(play([press(150, 50), release(150, 50)], beside).plans).toEqual([{ do: 'jump', point: { re: -1.5, im: 1.5 } }])
    const on = { ...context, designPoint: { re: -1.5, im: 1.5 } }
    expect(play([press(150, 50), release(150, 50)], on).plans).toEqual([])
  })

  it('pin a comment while pinning, whatever lies beneath, and only on release', () => {
    const pinning = { ...context, pinning: true }
    expect(play([press(200, 100)], pinning).plans).toEqual([])
    expect(play([press(200, 100), release(250, 100)], pinning).plans).toEqual([{ do: 'pin', point: { re: -0.5, im: 1 } }])
    expect(play([press(200, 100), cancel, release(250, 100)], pinning).plans).toEqual([])
  })
})

describe('panning', () => {
  it('moves the drawing with the hand and returns on cancel', () => {
    const { plans, gesture } = play([press(400, 300), drag(450, 310)])
    expect(plans).toEqual([{ do: 'view', viewport: { ...viewport, center: { re: -0.5, im: 0.1 } } }])
    expect(stepGesture(gesture, cancel, context)).toEqual({ gesture: idle, plans: [{ do: 'view', viewport }] })
  })

  it('does not jump to a meeting after a drag that began on one', () => {
    expect(deeds(play([press(152, 48), drag(180, 90), release(180, 90)]).plans)).toEqual(['view'])
  })
})

describe('pinching', () => {
  const two = [press(400, 300, 1, true), press(500, 300, 2, true)]

  it('zooms by the spread of the fingers and holds what is between them', () => {
    const { context: after, gesture } = play([...two, drag(350, 300, 1), drag(550, 300, 2)])
    expect(gesture.kind).toBe('pinching')
    expect(after.viewport.scale).toBe(200)
    expect(after.viewport.center).toEqual({ re: 0.75, im: -0.5 })
  })

  it('pans with the finger that stays, and returns on cancel', () => {
    const { gesture, context: after } = play([...two, drag(350, 300, 1), release(500, 300, 2)])
    expect(gesture).toMatchObject({ kind: 'panning', pointer: 1, pressedAt: { x: 350, y: 300 }, moved: true })
    expect(stepGesture(gesture, drag(360, 300), after).plans[0]).toMatchObject({ do: 'view' })
    expect(play([...two, drag(350, 300, 1), cancel]).plans.at(-1)).toEqual({ do: 'view', viewport })
  })

  it('takes over from a pan that has moved, where its finger is now', () => {
    const { gesture } = play([press(400, 300, 1, true), drag(440, 320, 1), press(500, 300, 2, true)])
    expect(gesture).toMatchObject({ kind: 'pinching', from: [{ x: 440, y: 320 }, { x: 500, y: 300 }] })
  })

  it('takes over from a drag that has not moved, never from one that has', () => {
    expect(play([press(200, 100, 1, true), press(400, 300, 2, true)]).gesture.kind).toBe('pinching')
    expect(play([press(200, 100, 1, true), drag(150, 150, 1), press(400, 300, 2, true)]).gesture.kind).toBe('dragging-point')
  })

  it('survives fingers on one spot', () => {
    const { context: after } = play([press(400, 300, 1, true), press(400, 300, 2, true), drag(410, 300, 1)])
    expect(after.viewport.scale).toBe(1000)
  })
})
