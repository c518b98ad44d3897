import { readFileSync } from 'node:fs'
import { expect } from 'vitest'

type Figure = number | null | boolean | string | Figure[] | { [name: string]: Figure }

/**
 * A case of tests/fixtures/published.json: `published` is the printed figure, good to `printedTolerance`; `exact` the same figure recomputed in
 * high precision; `provenance` tells whether the printed figure was read or comes from memory.
 */
interface PublishedCase {
  id: string
  source: string
  provenance: string
  inputs: Record<string, Figure>
  published: Record<string, Figure>
  exact: Record<string, Figure>
  printedTolerance: Record<string, number | string> | number
}

const cases = JSON.parse(readFileSync(new URL('../fixtures/published.json', import.meta.url), 'utf8')) as PublishedCase[]

/** One published case with its source and provenance as the title of a test. */
export function publishedCase(id: string) {
  const found = cases.find(one => one.id === id)
  if (!found) throw new Error(`no published case ${id}`)
  return {
    title: `${id}: ${found.source} [${found.provenance}]`,
    inputs: (name: string) => numbersOf(found.inputs[name]!),
    exact: (name: string) => numbersOf(found.exact[name]!),
    published: (name: string) => numbersOf(found.published[name]!),
    /** The figure is the exact one, and the exact one is the printed one as far as it was printed. */
    holds(name: string, actual: number | null | (number | null)[], relative = 1e-9): void {
      const exact = numbersOf(found.exact[name] ?? found.published[name]!)
      const figures = Array.isArray(actual) ? actual : [actual]
      expect(figures).toHaveLength(exact.length)
      figures.forEach((figure, i) => expectClose(figure, exact[i]!, relative, name))
      if (found.published[name] === undefined) return
      const tolerance = typeof found.printedTolerance === 'object' ? found.printedTolerance[name]! : found.printedTolerance
      numbersOf(found.published[name]!).forEach((printed, i) => {
        const allowed = typeof tolerance === 'string' ? Number.parseFloat(tolerance) / 100 * Math.abs(printed) : tolerance
        expect(Math.abs(figures[i]! - printed), `${name} as printed`).toBeLessThanOrEqual(allowed)
      })
    },
  }
}

/** Source and provenance of a case, for the title of a test. */
export function titled(id: string): string {
  return publishedCase(id).title
}

/** Every figure tightly against the recomputed one of its name, and against the printed one where there is one. */
export function holdAll(
  c: ReturnType<typeof publishedCase>, figures: Record<string, number | readonly (number | readonly number[])[]>, relative = 1e-10,
): void {
  for (const [name, figure] of Object.entries(figures)) c.holds(name, [figure].flat(2) as number[], relative)
}

/** Relative deviation; figures below 1e-3 are compared with 1e-3, so that a wanted 0 can be met. */
export function expectClose(actual: number | null, wanted: number, relative: number, what: string): void {
  expect(actual, what).not.toBeNull()
  expect(Math.abs(actual! - wanted) / Math.max(Math.abs(wanted), 1e-3), `${what}: ${actual} against ${wanted}`).toBeLessThanOrEqual(relative)
}

function numbersOf(figure: Figure): number[] {
  if (Array.isArray(figure)) return figure.flatMap(numbersOf)
  if (typeof figure === 'object' && figure !== null) return Object.values(figure).flatMap(numbersOf)
  if (typeof figure !== 'number') throw new Error('the figure is not a number')
  return [figure]
}
