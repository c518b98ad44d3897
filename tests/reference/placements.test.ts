/**
 * Gains and closed-loop roots against the 50-digit cases (made with mpmath by the definitions of docs/method.md; seeded random loops).
 */
import { describe, expect, it } from 'vitest'
import { loopFunctions } from '#shared/control/controller'
import { placeGains } from '#shared/control/placement'
import type { Controller, LoopModel } from '#shared/control/types'
import { distance, type Complex } from '#shared/numerics/complex'
import { roots } from '#shared/numerics/roots'
import { holdDeviation } from '../helpers/published'
import cases from '../fixtures/loops-50-digit.json'

const relativeTolerance = 1e-10

function model(plant: { numerator: number[], denominator: number[] }): LoopModel {
  return { plant, rateFeedback: 0 }
}

function expectSameRoots(found: Complex[], wanted: Complex[]): void {
  expect(found).toHaveLength(wanted.length)
  for (const root of wanted) {
    const gap = Math.min(...found.map(other => distance(other, root)))
    holdDeviation('Closed-loop root', gap / Math.hypot(root.re, root.im), relativeTolerance)
  }
}

describe.each(cases.placements.map((c, i) => ({ ...c, name: `${i} ${c.controller.form}` })))('placement $name', (c) => {
  const { dampingRatio, naturalFrequency } = c.designPoint
  const point = { re: -dampingRatio * naturalFrequency, im: naturalFrequency * Math.sqrt(1 - dampingRatio ** 2) }
  const controller = c.controller as Controller
  const placed = placeGains(model(c.plant), controller, point)

  it('reaches the point with the same gains', () => {
    const gains = placed.gains as unknown as Record<string, number>
    expect(Object.keys(gains)).toEqual(Object.keys(c.gains))
    for (const [name, wanted] of Object.entries(c.gains)) holdDeviation(`Gain of the form ${c.controller.form}`, Math.abs(gains[name]! / wanted - 1), relativeTolerance)
    expect(placed).toMatchObject({ leftoverAngle: 0, onLocus: true })
  })

  it('has the same closed-loop roots', () => {
    const found = roots(loopFunctions(model(c.plant), controller, placed.gains).characteristic)
    expectSameRoots(found, c.closedLoopPoles)
    expect(found.every(root => root.re < 0)).toBe(c.stable)
  })
})

describe.each(cases.oneGain.map((c, i) => ({ ...c, name: `${i} ${c.kind}` })))('one gain $name', (c) => {
  it('has the gain of the magnitude condition and the same closed-loop roots', () => {
    const controller: Controller = { form: 'gain', shape: c.shape }
    const placed = placeGains(model(c.plant), controller, c.designPoint)
    expect(placed.onLocus).toBe(true)
    expect(placed.gains).toHaveProperty('k')
    const { k } = placed.gains as { k: number }
    holdDeviation('Gain of the magnitude condition', Math.abs(k / c.gain - 1), relativeTolerance)
    expectSameRoots(roots(loopFunctions(model(c.plant), controller, { k: c.gain }).characteristic), c.closedLoopPoles)
  })
})
