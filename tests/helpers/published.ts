import { readFileSync } from 'node:fs'
import { expect } from 'vitest'
import { record } from './records'

export type Figure = number | null | boolean | string | Figure[] | { [name: string]: Figure }

/**
 * A case of tests/fixtures/published.json: `published` is the printed figure, good to `printedTolerance`; `exact` the same figure recomputed in
 * high precision; `provenance` tells whether the printed figure was read or comes from memory.
 */
export interface PublishedCase {
  id: string
  source: string
  provenance: string
  inputs: Record<string, Figure>
  published: Record<string, Figure>
  exact: Record<string, Figure>
  printedTolerance: Record<string, number | string> | number
}

export const publishedCases = JSON.parse(readFileSync(new URL('../fixtures/published.json', import.meta.url), 'utf8')) as PublishedCase[]

/** One published case with its source and provenance as the title of a test. */
export function publishedCase(id: string) {
  const found = publishedCases.find(one => one.id === id)
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
      record({ id, figure: name, computed: figures.map(figure => figure ?? NaN) })
      figures.forEach((figure, i) => expectClose(figure, exact[i]!, relative, name))
      if (found.published[name] === undefined) return
      numbersOf(found.published[name]!).forEach((printed, i) => {
        expect(Math.abs(figures[i]! - printed), `${name} as printed`).toBeLessThanOrEqual(printedTolerance(found, name, printed))
      })
    },
  }
}

/** How far from a printed figure the true one may lie, as far as it was printed. */
export function printedTolerance({ printedTolerance }: PublishedCase, name: string, printed: number): number {
  const tolerance = typeof printedTolerance === 'object' ? printedTolerance[name]! : printedTolerance
  return typeof tolerance === 'string' ? Number.parseFloat(tolerance) / 100 * Math.abs(printed) : tolerance
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

/** Close by `deviationOf`. */
export function expectClose(actual: number | null, wanted: number, relative: number, what: string): void {
  expect(actual, what).not.toBeNull()
  expect(deviationOf(actual!, wanted), `${what}: ${actual} against ${wanted}`).toBeLessThanOrEqual(relative)
}

/** Relative; figures below 1e-3 are compared with 1e-3. */
export function deviationOf(actual: number, wanted: number): number {
  return Math.abs(actual - wanted) / Math.max(Math.abs(wanted), 1e-3)
}

/** Holds a deviation from a 50-digit figure to its tolerance, and keeps it for docs/check-values.md. */
export function holdDeviation(group: string, deviation: number, tolerance: number): void {
  record({ group, deviation, tolerance })
  expect(deviation, group).toBeLessThanOrEqual(tolerance)
}

/** A figure, which may be a nest of lists, as one list of numbers. */
export function numbersOf(figure: Figure): number[] {
  if (Array.isArray(figure)) return figure.flatMap(numbersOf)
  if (typeof figure === 'object' && figure !== null) return Object.values(figure).flatMap(numbersOf)
  if (typeof figure !== 'number') throw new Error('the figure is not a number')
  return [figure]
}
