import { describe, expect, it } from 'vitest'
import { solveBodySchema } from '#shared/schemas/design'
import { issuesOf } from '../../../server/utils/issues'

const good = {
  loop: { plant: { form: 'coefficients', numerator: [1], denominator: [1, 1, 0] } },
  controller: { form: 'gain' },
  designPoint: { re: -0.5, im: 1 },
}

function issues(body: unknown) {
  const result = solveBodySchema.safeParse(body, { reportInput: true })
  return result.success ? [] : issuesOf(result.error)
}

describe('the list of faults in a request', () => {
  it('is empty for a good body', () => {
    expect(issues(good)).toEqual([])
  })

  it('names an unknown field, at the top and deep inside', () => {
    expect(issues({ ...good, extra: 1 })).toEqual([{ path: 'extra', message: 'unknown field' }])
    const deep = { ...good, loop: { plant: { ...good.loop.plant, gain: 2 } } }
    expect(issues(deep)).toEqual([{ path: 'loop.plant.gain', message: 'unknown field' }])
  })

  it('lists every fault, not only the first', () => {
    const body = { ...good, loop: { plant: { form: 'coefficients', numerator: ['x'], denominator: [] } } }
    expect(issues(body).map(issue => issue.path)).toEqual(['loop.plant.numerator.0', 'loop.plant.denominator'])
  })

  it('refuses numbers that are not finite', () => {
    expect(issues({ ...good, designPoint: { re: Number.NaN, im: 1 } }))
      .toEqual([{ path: 'designPoint.re', message: 'a finite number is needed here' }])
    expect(issues({ ...good, designPoint: { re: -1, im: Infinity } })[0]?.path).toBe('designPoint.im')
  })

  it('names the field of the shape that a union most nearly matches', () => {
    expect(issues({ ...good, designPoint: { re: -1, im: -1 } }))
      .toEqual([{ path: 'designPoint.im', message: 'a design point has im >= 0; its conjugate is implied' }])
    expect(issues({ ...good, designPoint: { dampingRatio: 2, naturalFrequency: 1 } })[0]?.path).toBe('designPoint.dampingRatio')
  })

  it('refuses s as the name of a parameter', () => {
    const plant = { form: 'expression', expression: '1/s', parameters: { s: { value: 1 } } }
    expect(issues({ ...good, loop: { plant } })).toEqual([
      { path: 'loop.plant.parameters.s', message: 's is the Laplace variable and cannot be a parameter' },
    ])
  })
})
