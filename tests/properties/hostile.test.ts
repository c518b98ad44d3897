/** Numbers that no machine has: an answer that Routh's criterion in exact arithmetic confirms, a figure said to be uncertain, or a reason. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { analyzeLoop } from '#shared/control/analyze'
import { NoAnswerError } from '#shared/control/errors'
import { gainWindow } from '#shared/control/gain-window'
import { solveDesign } from '#shared/control/solve'
import type { LoopModel, TransferFunction } from '#shared/control/types'
import { fromRoots } from '#shared/numerics/polynomial'
import { holds } from '../helpers/property'
import { exactCharacteristic, isHurwitz } from '../helpers/routh'

/** A size between ten to the one and ten to the other power, to three digits. */
const decades = (from: number, to: number) => fc.noShrink(fc.noBias(fc.integer({ min: 100 * from, max: 100 * to }).map(n => Number((10 ** (n / 100)).toPrecision(3)))))

/** Any coefficients, over thirty decades, zeros among them. */
const wildCoefficients: fc.Arbitrary<TransferFunction> = fc.integer({ min: 1, max: 8 }).chain((order) => {
  const coefficient = fc.tuple(fc.integer({ min: 0, max: 9 }), decades(-15, 15)).map(([kind, size]) => kind === 0 ? 0 : kind === 1 ? -size : size)
  const polynomial = (length: number) => fc.array(coefficient, { minLength: length, maxLength: length })
  return fc.tuple(polynomial(order), decades(-15, 15), fc.integer({ min: 1, max: order }).chain(polynomial), decades(-15, 15))
    .map(([tail, lead, numerator, last]) => ({ denominator: [lead, ...tail], numerator: [...numerator.slice(1), last] }))
})

/** Stable places over thirty decades: what a loop of wild coefficients hardly ever is. */
const wildPlaces: fc.Arbitrary<TransferFunction> = fc.tuple(fc.array(decades(-15, 15), { minLength: 1, maxLength: 12 }), decades(-2, 2))
  .map(([sizes, gain]) => {
    const denominator = fromRoots(sizes.map(size => ({ re: -size, im: 0 })))
    return { denominator, numerator: [gain * denominator.at(-1)!] }
  })

/** One place many times over, in rounded coefficients, the gain near a border of stability. */
const heaped: fc.Arbitrary<TransferFunction> = fc.tuple(fc.integer({ min: 3, max: 20 }), decades(-1, 1), fc.integer({ min: 1, max: 16 }), fc.boolean())
  .map(([count, place, digits, above]) => {
    const denominator = fromRoots(Array.from({ length: count }, () => ({ re: -place, im: 0 })))
    const border = Math.cos(Math.PI / count) ** -count
    return { denominator, numerator: [denominator.at(-1)! * border * (1 + (above ? 1 : -1) * 10 ** -digits)] }
  })

describe('hostile numbers', () => {
  it.each<[string, fc.Arbitrary<TransferFunction>, number]>([
    ['coefficients over thirty decades', wildCoefficients, 400],
    ['places over thirty decades', wildPlaces, 150],
    ['a pole of multiplicity 3 to 20 near the border of stability', heaped, 150],
  ])('%s: stable where Routh says so, unless said to be uncertain', (_, loops, runs) => {
    let [sure, unsure, refused] = [0, 0, 0]
    holds(30, runs, [loops], (plant) => {
      try {
        const { stable, uncertain, response, closedLoopPoles, readings } = solveDesign({ plant, rateFeedback: 0 }, { form: 'gain' }, { gains: { k: 1 } })
        expect([...response.output, ...response.effort, ...closedLoopPoles.flatMap(({ re, im }) => [re, im])].every(Number.isFinite)).toBe(true)
        expect(Object.values(readings).every(figure => figure === null || typeof figure === 'object' || Number.isFinite(figure))).toBe(true)
        if (uncertain.includes('stable')) return void unsure++
        sure++
        expect(isHurwitz(exactCharacteristic(plant.denominator, 1, plant.numerator))).toBe(stable)
      }
      catch (error) {
        if (!(error instanceof NoAnswerError)) throw error
        refused++
      }
    })
    expect(sure, `sure ${sure}, unsure ${unsure}, refused ${refused}`).toBeGreaterThan(runs / 2)
  })

  it('leave the locus and the gain window with an answer or a reason', () => {
    holds(33, 30, [fc.oneof(wildCoefficients, wildPlaces, heaped)], (plant) => {
      const model: LoopModel = { plant, rateFeedback: 0 }
      for (const work of [
        () => analyzeLoop(model, { form: 'gain' }, { dampingRatio: 0.5 }),
        () => gainWindow(model, { form: 'gain' }, { k: 1 }, [{ reading: 'overshootPercent', limit: 'at-most', value: 20 }, { reading: 'phaseMarginDeg', limit: 'at-least', value: 40 }]),
      ]) {
        try {
          expect(numbersIn(work()).every(Number.isFinite)).toBe(true)
        }
        catch (error) {
          if (!(error instanceof NoAnswerError)) throw error
        }
      }
    })
  })
})

function numbersIn(value: unknown): number[] {
  if (typeof value === 'number') return [value]
  return typeof value === 'object' && value !== null ? Object.values(value).flatMap(numbersIn) : []
}
