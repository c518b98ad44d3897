import { deviationOf, numbersOf, printedTolerance, publishedCases, type PublishedCase } from './published'
import type { DeviationRecord, FigureRecord } from './records'

/** Published cases and figures (`case.figure`) that no test holds the product to, and why. */
export const notApplied: Record<string, string> = {
  'A02.ts5_s': 'the estimate beside a design point is that of the 2 % band',
  'C01.order2_opt': 'the product optimises no integral criterion',
  'C01.order3_opt': 'likewise',
  'C01.order4_opt': 'likewise',
  'C01.itae_table': 'likewise',
  'C01.all_orders_stable': 'not a number; the test of the case asserts it',
  'D05.Kc': 'a tuning rule; the ultimate gain and frequency that it starts from are held',
  'D05.tauI': 'likewise',
  'D06': 'dead time is simulated as a delay, not by Padé approximants',
  'E01.step_P': 'a rule for a reaction curve: the product has no tuning rules and identifies no curve',
  'E01.step_PI': 'likewise',
  'E01.step_PI_ki': 'likewise',
  'E01.step_PID': 'likewise',
  'E03.ZN_PI': 'tuning rules; the ultimate gain and frequency that they start from are held',
  'E03.CC_PI': 'likewise',
  'E03.CC_PID_case2': 'likewise',
  'E03.CC_PD_case2': 'likewise',
  'E05': 'a table of tuning rules; the product has none',
  'E06': 'tuning rules; the ultimate gain and period that they start from are held in E01 and E02',
  'E08': 'a table of tuning rules; the product has none',
  'H01.tau': 'the product identifies no plant from a measured curve',
  'H01.theta': 'likewise',
  'H01.theta_alt': 'likewise',
  'H01.Kp': 'likewise',
}

/** Names of all figures of a case, the printed ones first. */
export function figureNames({ published, exact }: PublishedCase): string[] {
  return [...new Set([...Object.keys(published), ...Object.keys(exact)])]
}

/** docs/check-values.md, from what the reference tests recorded. */
export function checkValues(figures: readonly FigureRecord[], deviations: readonly DeviationRecord[]): string {
  return [
    '# Check values',
    '',
    'What the product computes beside what was published, and beside arithmetic with 50 digits. Written by `npm run check-values` from a run of the reference',
    'tests, which hold every figure to its tolerance; a test fails when this page is out of date. How each figure is defined: [the method](method.md).',
    '',
    '## Published cases',
    '',
    'Computed figures have six digits here. Off the printed figure: the difference, which for most cases is what the book rounded or read from a graph. Off the',
    'exact figure: the relative deviation from the same figure recomputed in high precision (figures below 0.001 compared with 0.001), as the next power of ten.',
    'Sources of which the printed figures come from memory, wholly or in part, say so.',
    '',
    ...table(['Case', 'Figure', 'Printed', 'Computed', 'Off the printed', 'Off the exact', 'Source'], publishedCases.flatMap(one => rowsOf(one, figures))),
    '',
    '## Not applied',
    '',
    ...table(['Case', 'Why'], Object.entries(notApplied).map(([name, why]) => [name.replace('.', ', '), why])),
    '',
    '## Cases in 50-digit arithmetic',
    '',
    'Loops made at random, solved with mpmath by the definitions of the method. Worst deviation of each group, relative where nothing else is said.',
    '',
    ...table(['Figure', 'Compared', 'Worst deviation', 'Allowed'], groupRows(deviations)),
    '',
  ].join('\n')
}

function rowsOf(one: PublishedCase, figures: readonly FigureRecord[]): string[][] {
  const rows = figureNames(one).flatMap((name) => {
    const computed = worstRecord(one, name, figures)
    return computed === undefined ? [] : [figureRow(one, name, computed)]
  })
  const memory = one.provenance.includes('partly') ? ' (partly from memory)' : one.provenance.includes('memory') ? ' (from memory)' : ''
  return rows.map((row, i) => i === 0 ? [one.id, ...row, one.source + memory] : ['', ...row, ''])
}

/** Of a figure that several tests compute, the one that is farthest off. */
function worstRecord(one: PublishedCase, name: string, figures: readonly FigureRecord[]): number[] | undefined {
  const found = figures.filter(({ id, figure }) => id === one.id && figure === name).map(({ computed }) => computed)
  return found.sort((a, b) => offExact(one, name, b) - offExact(one, name, a))[0]
}

function offExact({ exact, published }: PublishedCase, name: string, computed: number[]): number {
  const wanted = numbersOf(exact[name] ?? published[name]!)
  return Math.max(...computed.map((figure, i) => deviationOf(figure, wanted[i]!)))
}

function figureRow(one: PublishedCase, name: string, computed: number[]): string[] {
  const printed = one.published[name] === undefined ? null : numbersOf(one.published[name])
  return [
    `\`${name}\``,
    printed === null ? 'none' : printed.map(figure => short(figure)).join(', '),
    computed.map(figure => short(figure)).join(', '),
    printed === null ? '' : offPrinted(one, name, printed, computed),
    below(offExact(one, name, computed)),
  ]
}

/** The largest difference, with what rounding and reading of the printed figure allow. */
function offPrinted(one: PublishedCase, name: string, printed: number[], computed: number[]): string {
  const off = printed.map((figure, i) => ({ gap: Math.abs(computed[i]! - figure), allowed: printedTolerance(one, name, figure) }))
  const { gap, allowed } = off.reduce((most, next) => next.gap / next.allowed > most.gap / most.allowed ? next : most)
  return `${gap < 1e-9 ? 0 : short(gap, 2)} of ${short(allowed, 2)}`
}

function groupRows(deviations: readonly DeviationRecord[]): string[][] {
  const groups = [...new Set(deviations.map(({ group }) => group))]
  return groups.map((group) => {
    const members = deviations.filter(one => one.group === group)
    return [group, `${members.length}`, below(Math.max(...members.map(({ deviation }) => deviation))), `${members[0]!.tolerance}`]
  })
}

/** Few enough digits that no machine differs; what is left of a zero is 0. */
function short(figure: number, digits = 6): string {
  return Math.abs(figure) < 1e-12 ? '0' : `${Number(figure.toPrecision(digits))}`
}

/** The next power of ten, from 1e-13 on: the last digits differ from machine to machine. */
function below(deviation: number): string {
  return `< 1e${Math.max(-13, Math.floor(Math.log10(deviation)) + 1)}`
}

function table(head: string[], rows: string[][]): string[] {
  return [head, head.map(() => '---'), ...rows].map(row => `| ${row.join(' | ')} |`)
}
