import { describe, expect, it } from 'vitest'
import { areGainsOf, controllerForms, offeredForms } from '~/utils/bench/controller-forms'
import { demoScenario } from '~/utils/bench/demo-scenario'
import { estimateSentence } from '~/utils/bench/estimate-sentence'
import { sayField, sayIssue } from '~/utils/bench/field-words'
import { negativeGainSentence } from '~/utils/bench/gain-words'
import { uncertaintySentence } from '~/utils/bench/uncertainty-sentence'
import { formatLimit, readingDescriptions } from '~/utils/bench/readings'
import { differences } from '~/utils/describe-document'
import { readingNames } from '#shared/schemas/design'
import { scenarioDocumentSchema } from '#shared/schemas/document'
import { solveDesign } from '#shared/control/solve'
import { controllerSchema } from '#shared/schemas/loop'
import { resolveController } from '../../../server/utils/loop-model'
import type { Readings } from '#shared/control/types'

const design = (overshoot: number | null, settling: number | null, stable = true) => ({
  stable,
  readings: { overshootPercent: overshoot, settlingTime: settling } as Readings,
  estimate: { overshootPercent: 10, settlingTime: 4, peakTime: 1, riseTime: 1 },
})

describe('sentences of the bench', () => {
  it('says what is uncertain, and keeps still where nothing is', () => {
    expect(uncertaintySentence({ uncertain: [] })).toBeNull()
    expect(uncertaintySentence({ uncertain: ['closedLoopPoles'] })).toMatch(/^The roots are uncertain/)
    expect(uncertaintySentence({ uncertain: ['closedLoopPoles', 'settlingTime'] })).toMatch(/^Figures marked \? are uncertain/)
    expect(uncertaintySentence({ uncertain: ['closedLoopPoles', 'stable', 'settlingTime'] })).toMatch(/rounding decides whether the loop is stable/)
  })

  it('says how far the rules of thumb are off', () => {
    expect(estimateSentence(design(16.3, 4))).toBe('The overshoot is 6.3 points above the second-order estimate.')
    expect(estimateSentence(design(10.5, 3))).toBe('The loop settles 25 % sooner than the rule of thumb.')
    expect(estimateSentence(design(8, 12))).toBe('The overshoot is 2.0 points below the second-order estimate, and settling takes 3.0 times the rule of thumb.')
    expect(estimateSentence(design(10.9, 4.1))).toMatch(/^The second-order estimate is close here/)
    expect(estimateSentence(design(null, null, false))).toBeNull()
  })

  it('tells negative gains in words, places of a lead left out', () => {
    expect(negativeGainSentence({ kp: -1, kd: 2 })).toBe('kp is negative: this point asks for positive feedback.')
    expect(negativeGainSentence({ kp: -1, ki: -2 })).toBe('kp and ki are negative: this point asks for positive feedback.')
    expect(negativeGainSentence({ k: 3, zero: -1, pole: -10 })).toBeNull()
  })

  it('names fields as the bench does', () => {
    expect(sayField('loop.plant.parameters.J.value')).toBe('Parameter J')
    expect(sayField('requirements.2.value')).toBe('Requirement 3')
    expect(sayField('loop.plant.denominator.0')).toBe('Denominator')
    expect(sayIssue({ path: '', message: 'no body' })).toBe('no body')
  })

  it('describes every reading that a requirement may name, once', () => {
    expect(readingDescriptions.map(({ name }) => name).sort()).toEqual([...readingNames].sort())
    expect(formatLimit({ reading: 'settlingTime', limit: 'at-most', value: 3.5 })).toBe('≤\u00A03.5\u00A0s')
    expect(formatLimit({ reading: 'phaseMarginDeg', limit: 'at-least', value: 50 })).toBe('≥\u00A050°')
  })
})

describe('the table of controller forms', () => {
  const model = { plant: { numerator: [2], denominator: [1, 3, 2, 0] }, rateFeedback: 0 }

  it('describes every form of the schema, once', () => {
    expect(Object.keys(controllerForms).sort()).toEqual(controllerSchema.options.map(({ shape }) => shape.form.value).sort())
  })

  it.each(offeredForms)('names the gains that the engine gives for %s, and what they reach', (form) => {
    const designPoint = { re: -0.5, im: 1 }
    const solution = solveDesign(model, resolveController(controllerForms[form].fresh(designPoint)), { designPoint })
    expect(Object.keys(solution.gains)).toEqual(controllerForms[form].gains)
    expect(offeredForms.filter(other => areGainsOf(other, solution.gains))).toEqual(form === 'lead' || form === 'lag' ? ['lead', 'lag'] : [form])
    expect(solution.onLocus).toBe(controllerForms[form].reachesEveryPoint)
  })
})

describe('two versions of a scenario', () => {
  it('differ in words to choose by', () => {
    const { title, machine, axis, document } = demoScenario
    const mine = { title, machine, axis, document }
    expect(differences(mine, mine)).toEqual([])
    const other = { ...document, controller: { form: 'lead' as const, poleZeroRatio: 8 }, designPoint: { re: -1, im: 0.5 }, requirements: document.requirements.slice(0, 2) }
    expect(differences(mine, { ...mine, machine: '', document: other })).toEqual([
      { what: 'Machine', mine: 'Quay crane 2', theirs: 'none' },
      { what: 'Design point', mine: '−0.5783 + 0.7711j (damping ratio 0.6, 0.9639 rad/s)', theirs: '−1.000 + 0.5000j (damping ratio 0.8944, 1.118 rad/s)' },
      { what: 'Controller', mine: 'one gain, k', theirs: 'lead, pole-zero ratio 8' },
      {
        what: 'Requirements',
        mine: 'overshoot at most 12\u00A0%; settling time at most 7\u00A0s; phase margin at least 55°; gain margin at least 12\u00A0dB; ramp error at most 1.5\u00A0s',
        theirs: 'overshoot at most 12\u00A0%; settling time at most 7\u00A0s',
      },
    ])
  })
})

describe('the demo axis', () => {
  it('is a valid document whose design lies on the locus and meets what is asked', () => {
    const { document } = demoScenario
    expect(scenarioDocumentSchema.safeParse(document).success).toBe(true)
    const [kt, J, b, T] = [26000, 2.4e6, 3e6, 0.09]
    const plant = { numerator: [kt], denominator: [J * T, J + b * T, b, 0] }
    const designPoint = document.designPoint as { re: number, im: number }
    const solution = solveDesign({ plant, rateFeedback: 0 }, { form: 'gain' }, { designPoint }, { requirements: document.requirements })
    expect([solution.onLocus, solution.stable, solution.unmet]).toEqual([true, true, 0])
  })
})
