/**
 * Loops whose numbers are hard on double arithmetic, against 120-digit arithmetic on the very same numbers (tests/fixtures/make-hostile-loops.py): each
 * figure is within the accuracy of docs/method.md, or is said to be uncertain.
 */
import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { analyzeLoop } from '#shared/control/analyze'
import { NoAnswerError } from '#shared/control/errors'
import { solveDesign } from '#shared/control/solve'
import type { DesignSolution, Readings, TransferFunction, UncertainFigure } from '#shared/control/types'
import { evaluateLoop } from '../../helpers/loops'

interface HostileLoop {
  kind: string
  plant: TransferFunction
  gain: number
  stable: boolean
  closedLoopPoles: [re: number, im: number][]
  phaseMarginDeg: number | null
  gainCrossover: number | null
  gainMarginUpper: number | null
  gainMarginLower: number | null
  finalValue?: number
  overshootPercent?: number
  peakTime?: number | null
  settlingTime?: number
}

const loops = JSON.parse(readFileSync(new URL('../../fixtures/hostile-loops.json', import.meta.url), 'utf8')) as HostileLoop[]

/** Named as in docs/method.md, "accuracy that must hold". */
const accuracy = { root: 1e-10, gain: 1e-10, overshootPoints: 1e-6, time: 1e-7, margin: 1e-8 }

const solve = ({ plant, gain }: HostileLoop) => solveDesign({ plant, rateFeedback: 0 }, { form: 'gain' }, { gains: { k: gain } })

/** The largest distance from a true root to the nearest told one that is not taken yet, relative to its size. */
function worstRoot({ closedLoopPoles }: DesignSolution, wanted: HostileLoop['closedLoopPoles']): number {
  const rest = [...closedLoopPoles]
  return Math.max(...wanted.map(([re, im]) => {
    const gap = rest.map(root => Math.hypot(root.re - re, root.im - im))
    const nearest = gap.indexOf(Math.min(...gap))
    rest.splice(nearest, 1)
    return gap[nearest]! / Math.hypot(re, im)
  }))
}

/** A figure within its accuracy (below `least` absolutely), or said to be uncertain. */
function expectSound(uncertain: readonly UncertainFigure[], name: keyof Readings, found: number | null, wanted: number | null, relative: number, least = 0): void {
  if (uncertain.includes(name)) return
  if (found === null || wanted === null) return expect(found, name).toBe(wanted)
  expect(Math.abs(found - wanted), `${name}: ${found} against ${wanted}`).toBeLessThanOrEqual(relative * Math.max(Math.abs(wanted), least))
}

describe('hostile numbers', () => {
  it.each(loops.map((loop, i) => ({ name: `${i} ${loop.kind}`, loop })))('$name', ({ loop }) => {
    const solution = solve(loop)
    const { readings, uncertain, stable } = solution
    if (!uncertain.includes('closedLoopPoles')) expect(worstRoot(solution, loop.closedLoopPoles)).toBeLessThan(accuracy.root)
    if (!uncertain.includes('stable')) expect(stable).toBe(loop.stable)
    expectSound(uncertain, 'finalValue', readings.finalValue, loop.finalValue ?? null, accuracy.gain)
    expectSound(uncertain, 'overshootPercent', readings.overshootPercent, loop.overshootPercent ?? null, accuracy.overshootPoints / 100, 100)
    expectSound(uncertain, 'peakTime', readings.peakTime, loop.peakTime ?? null, accuracy.time)
    expectSound(uncertain, 'settlingTime', readings.settlingTime, loop.settlingTime ?? null, accuracy.time)
    expectSound(uncertain, 'phaseMarginDeg', readings.phaseMarginDeg, loop.phaseMarginDeg, accuracy.margin, 1)
    expectSound(uncertain, 'gainCrossover', readings.gainCrossover, loop.gainCrossover, accuracy.margin)
    expectSound(uncertain, 'gainMargin', readings.gainMargin.upper, loop.gainMarginUpper, accuracy.margin)
    expectSound(uncertain, 'gainMargin', readings.gainMargin.lower, loop.gainMarginLower, accuracy.margin)
  })

  it.each(loops.map((loop, i) => ({ name: `${i} ${loop.kind}`, loop })))('the locus of $name is drawn or refused with a reason', ({ loop }) => {
    try {
      const { branches } = analyzeLoop({ plant: loop.plant, rateFeedback: 0 }, { form: 'gain' }, { dampingRatio: 0.5 })
      expect(branches.flatMap(({ points }) => points.flat()).every(Number.isFinite)).toBe(true)
    }
    catch (error) {
      expect(error).toBeInstanceOf(NoAnswerError)
    }
  }, 30_000)
})

describe('what is said to be uncertain', () => {
  const ofKind = (pattern: RegExp) => loops.filter(({ kind }) => pattern.test(kind)).map(loop => solve(loop).uncertain)

  it('is nothing in an ordinary loop, whatever its unit of time', () => {
    expect(ofKind(/^time in units/).flat()).toEqual([])
    expect(evaluateLoop({ numerator: [4], denominator: [1, 6, 5, 0] }).uncertain).toEqual([])
    // A critically damped design has a double root: known to eight digits, which no screen shows.
    expect(evaluateLoop({ numerator: [1], denominator: [1, 2, 0] }).uncertain).toEqual([])
  })

  it('are the roots where three or more of them coincide, but not the readings', () => {
    for (const uncertain of ofKind(/-fold closed-loop root/)) expect(uncertain).toEqual(['closedLoopPoles'])
  })

  it('is stability, and every figure of the response, where only rounding decides', () => {
    for (const uncertain of ofKind(/^gain -?1e-14 from the border/)) {
      expect(uncertain).toEqual(expect.arrayContaining(['stable', 'overshootPercent', 'settlingTime', 'bandwidth']))
      expect(uncertain).not.toContain('phaseMarginDeg')
    }
    for (const uncertain of ofKind(/^gain -?1e-0?[369] from the border/)) expect(uncertain).not.toContain('stable')
    expect(ofKind(/^gain -1e-12 from the border/)[0]).toContain('settlingTime')
  })

  it('is not the stability of an undamped loop, whose roots lie on the axis for certain', () => {
    const { stable, uncertain } = evaluateLoop({ numerator: [2], denominator: [1, 0, 0] })
    expect({ stable, uncertain }).toEqual({ stable: false, uncertain: [] })
    // A root at the origin that nothing moves: the same.
    expect(evaluateLoop({ numerator: [1, 0], denominator: [1, 3, 2, 0] })).toMatchObject({ stable: false, uncertain: [] })
  })
})
