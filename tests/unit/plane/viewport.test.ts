import { describe, expect, it } from 'vitest'
import { seededRandom } from '../../helpers/random'
import { boundsOf, fitBounds, holdAt, isInView, panBy, resize, toScreen, toWorld, zoomAbout, type Viewport } from '~/utils/plane/viewport'

const viewport: Viewport = { center: { re: -2, im: 1 }, scale: 50, width: 400, height: 300 }

describe('viewport', () => {
  it('puts its centre in the middle, real parts to the right, imaginary parts up', () => {
    expect(toScreen(viewport, { re: -2, im: 1 })).toEqual({ x: 200, y: 150 })
    expect(toScreen(viewport, { re: 0, im: 2 })).toEqual({ x: 300, y: 100 })
    expect(toWorld(viewport, { x: 300, y: 100 })).toEqual({ re: 0, im: 2 })
    expect(boundsOf(viewport)).toEqual({ left: -6, right: 2, bottom: -2, top: 4 })
  })

  it('returns from the screen to where it came from, at any scale', () => {
    const random = seededRandom(7)
    for (let n = 0; n < 200; n++) {
      const scale = 10 ** (random() * 12 - 4)
      const view: Viewport = { center: { re: random() - 0.5, im: random() - 0.5 }, scale, width: 300 + 900 * random(), height: 200 + 700 * random() }
      const at = { x: view.width * random(), y: view.height * random() }
      const back = toScreen(view, toWorld(view, at))
      expect(Math.hypot(back.x - at.x, back.y - at.y)).toBeLessThan(1e-5)
    }
  })

  it('zooms about a place that stays where it is', () => {
    const at = { x: 37, y: 211 }
    const zoomed = zoomAbout(viewport, at, 4)
    expect(zoomed.scale).toBe(200)
    expect(toWorld(zoomed, at).re).toBeCloseTo(toWorld(viewport, at).re, 12)
    expect(toWorld(zoomed, at).im).toBeCloseTo(toWorld(viewport, at).im, 12)
  })

  it('stops zooming at its limits', () => {
    expect(zoomAbout(viewport, { x: 0, y: 0 }, 1e300).scale).toBe(1e10)
    expect(zoomAbout(viewport, { x: 0, y: 0 }, 1e-300).scale).toBe(1e-4)
  })

  it('pans with the hand and holds a point at a place', () => {
    expect(panBy(viewport, 50, -100).center).toEqual({ re: -3, im: -1 })
    expect(toScreen(holdAt(viewport, { re: 5, im: 5 }, { x: 10, y: 20 }), { re: 5, im: 5 })).toEqual({ x: expect.closeTo(10, 9), y: expect.closeTo(20, 9) })
  })

  it('keeps centre and scale when the window changes', () => {
    expect(resize(viewport, 100, 100)).toEqual({ ...viewport, width: 100, height: 100 })
  })

  it('fits bounds by the tighter of the two axes, and survives bounds without extent', () => {
    expect(fitBounds({ left: -4, right: 0, bottom: -1, top: 1 }, 500, 300, 50)).toEqual({ center: { re: -2, im: 0 }, scale: 100, width: 500, height: 300 })
    expect(fitBounds({ left: 1, right: 1, bottom: 2, top: 2 }, 500, 300, 50)).toEqual({ center: { re: 1, im: 2 }, scale: 1e10, width: 500, height: 300 })
  })

  it('knows what is in view', () => {
    expect(isInView(viewport, { x: 0, y: 300 })).toBe(true)
    expect(isInView(viewport, { x: 5, y: 150 }, 6)).toBe(false)
    expect(isInView(viewport, { x: -5, y: 150 }, -6)).toBe(true)
  })
})
