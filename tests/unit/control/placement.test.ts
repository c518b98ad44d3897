import { describe, expect, it } from 'vitest'
import { wrapAngle } from '#shared/control/angle'
import { loopFunctions } from '#shared/control/controller'
import { NoAnswerError } from '#shared/control/errors'
import { placeGains } from '#shared/control/placement'
import type { Controller, LoopModel } from '#shared/control/types'
import { distance } from '#shared/numerics/complex'
import { fromRoots } from '#shared/numerics/polynomial'
import { roots } from '#shared/numerics/roots'

function model(numerator: number[], denominator: number[], rateFeedback = 0): LoopModel {
  return { plant: { numerator, denominator }, rateFeedback }
}

const twoGainForms: Controller[] = [{ form: 'pd' }, { form: 'pi' }, { form: 'rate' }]

describe('wrapAngle', () => {
  it('brings every angle to (-pi, pi]', () => {
    expect(wrapAngle(-Math.PI)).toBe(Math.PI)
    expect(wrapAngle(Math.PI)).toBe(Math.PI)
    expect(wrapAngle(7 * Math.PI / 2)).toBeCloseTo(-Math.PI / 2, 14)
    expect(wrapAngle(0.3)).toBe(0.3)
  })
})

describe('one gain', () => {
  it('leaves an angle off the locus and none on it', () => {
    const servo = model([1], [1, 3, 2, 0])
    expect(placeGains(servo, { form: 'gain' }, { re: -1 / 3, im: 1 / Math.sqrt(3) })).toMatchObject({ onLocus: true, alternatives: [] })
    const off = placeGains(servo, { form: 'gain' }, { re: -1, im: 1 })
    // The poles see the point at 135, 90 and 45 degrees: L0 has -270 degrees, less 180 makes -450, a whole turn more -90.
    expect(off.leftoverAngle).toBeCloseTo(-Math.PI / 2, 14)
    expect(off.onLocus).toBe(false)
    expect((off.gains as { k: number }).k).toBeCloseTo(2, 14)
  })

  it('asks for positive feedback by a leftover angle of 180 degrees', () => {
    expect(placeGains(model([-1], [1, 1]), { form: 'gain' }, { re: -3, im: 0 }).leftoverAngle).toBe(Math.PI)
  })

  it('needs no gain at an open-loop pole and has none at a zero', () => {
    const plant = model([1, 3], fromRoots([{ re: -1, im: 2 }, { re: -1, im: -2 }, { re: -0.1, im: 0 }]))
    expect(placeGains(plant, { form: 'gain' }, { re: -1, im: 2 })).toMatchObject({ gains: { k: 0 }, onLocus: true })
    expect(() => placeGains(plant, { form: 'gain' }, { re: -3, im: 0 })).toThrow(NoAnswerError)
    expect(() => placeGains(plant, { form: 'pd' }, { re: -3, im: 0 })).toThrow(/zero of the loop/)
  })
})

describe('two gains', () => {
  it.each(twoGainForms)('make a real point a double root, the limit from above: $form', (controller) => {
    const plant = model([2], [1, 3, 7, 0])
    const { gains } = placeGains(plant, controller, { re: -1.4, im: 0 })
    const found = roots(loopFunctions(plant, controller, gains).characteristic)
    expect(found.filter(root => distance(root, { re: -1.4, im: 0 }) < 1e-7)).toHaveLength(2)
    const near = placeGains(plant, controller, { re: -1.4, im: 1e-7 }).gains as unknown as Record<string, number>
    for (const [name, value] of Object.entries(gains)) expect(near[name]! / value).toBeCloseTo(1, 12)
  })

  it.each<Controller>([{ form: 'pd' }, { form: 'rate' }])('of a first-order loop cannot make a pair: the gains that would do it make the loop algebraic: $form', (controller) => {
    const plant = model([0.619], [1, 0.607])
    const { gains } = placeGains(plant, controller, { re: -1.6932, im: 2.8557790110581034 })
    expect(() => loopFunctions(plant, controller, gains)).toThrow(/algebraic/)
  })

  it('report negative gains as they are', () => {
    expect(placeGains(model([1], [1, 10, 0]), { form: 'pd' }, { re: -1, im: 1 }).gains).toEqual({ kp: 2, kd: -8 })
  })

  it('know that no PI puts a root on its own integrator', () => {
    expect(() => placeGains(model([1], [1, 1]), { form: 'pi' }, { re: 0, im: 0 })).toThrow(NoAnswerError)
  })
})

describe('lead', () => {
  it('says what is asked for and what the ratio can give', () => {
    const controller: Controller = { form: 'lead', poleZeroRatio: 2 }
    expect(() => placeGains(model([1], [1, 1, 0]), controller, { re: -3.5, im: 6.06 })).toThrow(/52\.\d degrees of phase lead; a lead of ratio 2 gives at most/)
    expect(() => placeGains(model([1], [1, 1, 0]), controller, { re: -0.2, im: 0.1 })).toThrow(/phase lag/)
  })

  it('gives the wanted one of its zeros, the others in their order, and the first where there are fewer', () => {
    const plant = model([1], [1, 2, 0])
    const point = { re: -2, im: 2 }
    const place = (alternative?: number) => placeGains(plant, { form: 'lead', poleZeroRatio: 6, alternative }, point)
    const { gains: first, alternatives: [second] } = place()
    expect(second).toBeDefined()
    expect((first as { k: number }).k).toBeGreaterThan((second as { k: number }).k)
    expect(place(0)).toEqual(place())
    expect(place(1)).toEqual({ gains: second, alternatives: [first], leftoverAngle: 0, onLocus: true })
    expect(place(2)).toEqual(place())
  })

  it('makes a real point a double root', () => {
    const plant = model([1], [1, 1, 0])
    const { gains } = placeGains(plant, { form: 'lead', poleZeroRatio: 8 }, { re: -2, im: 0 })
    const found = roots(loopFunctions(plant, { form: 'lead', poleZeroRatio: 8 }, gains).characteristic)
    expect(found.filter(root => distance(root, { re: -2, im: 0 }) < 1e-7)).toHaveLength(2)
  })

  it('finds the one zero of the least ratio, where two fall together', () => {
    // Seen from -1.5 + j 1.5 sqrt 3 a lead of zero 9/(2 + sqrt 7) and pole 2 + sqrt 7 adds the most its ratio can, just what 10/(s(s+1)) lacks.
    const pole = 2 + Math.sqrt(7)
    for (const ulps of [-2, -1, 0, 1, 2]) {
      const poleZeroRatio = pole * pole / 9 * (1 + ulps * 2 ** -52)
      const { gains, alternatives } = placeGains(model([10], [1, 1, 0]), { form: 'lead', poleZeroRatio }, { re: -1.5, im: 1.5 * Math.sqrt(3) })
      expect((gains as { zero: number }).zero).toBeCloseTo(-9 / pole, 6)
      expect(alternatives).toEqual([])
    }
  })
})
