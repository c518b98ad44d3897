import { appendFileSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs'

/** A figure of a published case as the product computed it. */
export interface FigureRecord { id: string, figure: string, computed: number[] }

/** How far one figure of the 50-digit cases was off, in the measure of its group. */
export interface DeviationRecord { group: string, deviation: number, tolerance: number }

const folder = new URL('../../.cache/', import.meta.url)
const file = new URL('check-values.jsonl', folder)

/** Before the reference tests: what an earlier run computed goes. */
export function setup(): void {
  mkdirSync(folder, { recursive: true })
  writeFileSync(file, '')
}

/** Keeps a figure for docs/check-values.md: one line each, so that the workers of a run can write side by side. */
export function record(line: FigureRecord | DeviationRecord): void {
  appendFileSync(file, `${JSON.stringify(line)}\n`)
}

/** Everything that the reference tests of this run computed, in an order that does not depend on which worker was first. */
export function recorded(): { figures: FigureRecord[], deviations: DeviationRecord[] } {
  const lines = readFileSync(file, 'utf8').trim().split('\n').sort().map(line => JSON.parse(line) as FigureRecord | DeviationRecord)
  return { figures: lines.filter(line => 'id' in line), deviations: lines.filter(line => 'group' in line) }
}
