/** Runs after the reference tests (see vitest.config.ts) and reads what they recorded. */
import { describe, expect, it } from 'vitest'
import { checkValues, figureNames, notApplied } from '../helpers/check-values'
import { publishedCases } from '../helpers/published'
import { recorded } from '../helpers/records'

const { figures, deviations } = recorded()

describe('every published figure', () => {
  const held = new Set(figures.map(({ id, figure }) => `${id}.${figure}`))

  it('is held, or said to be not applied and why', () => {
    const names = publishedCases.flatMap(one => figureNames(one).map(figure => ({ id: one.id, name: `${one.id}.${figure}` })))
    expect(names.filter(({ id, name }) => !held.has(name) && !(id in notApplied) && !(name in notApplied)).map(({ name }) => name)).toEqual([])
  })

  it('is not both', () => {
    expect(Object.keys(notApplied).filter(name => [...held].some(other => other === name || other.startsWith(`${name}.`)))).toEqual([])
  })
})

describe('docs/check-values.md', () => {
  it('is what this run computed; `npm run check-values` writes it anew', async () => {
    await expect(checkValues(figures, deviations)).toMatchFileSnapshot('../../docs/check-values.md')
  })
})
