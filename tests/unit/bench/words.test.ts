import { describe, expect, it } from 'vitest'
import { actuationSummary, formatSpan } from '~/utils/bench/actuation-words'
import { areGainsOf, controllerForms, offeredForms } from '~/utils/bench/controller-forms'
import { demoScenario } from '~/utils/bench/demo-scenario'
import { estimateDifference } from '~/utils/bench/estimate-difference'
import { sayField, sayIssue } from '~/utils/bench/field-words'
import { withTrueMinus } from '~/utils/bench/format'
import { gainChoices } from '~/utils/bench/gain-choices'
import { negativeGainSentence } from '~/utils/bench/gain-words'
import { uncertaintySentence } from '~/utils/bench/uncertainty-sentence'
import { formatLimit, readingDescriptions } from '~/utils/bench/readings'
import { steadyStateRows } from '~/utils/bench/steady-state-rows'
import { differences } from '~/utils/describe-document'
import { readingNames } from '#shared/schemas/design'
import { scenarioDocumentSchema } from '#shared/schemas/document'
import { solveDesign } from '#shared/control/solve'
import { controllerSchema } from '#shared/schemas/loop'
import { resolveController } from '../../../server/utils/loop-model'
import type { Readings } from '#shared/control/types'

describe('sentences of the bench', () => {
  it('says how far an estimate is off, where that is worth saying', () => {
    const [overshoot, settling] = [{ unit: '%' }, { unit: 's' }]
    expect(estimateDifference(overshoot, 16.3, 10)).toBe('6.3\u00A0pt low')
    expect(estimateDifference(overshoot, 0, 10)).toBe('10.0\u00A0pt high')
    expect(estimateDifference(overshoot, 10.9, 10)).toBeNull()
    expect(estimateDifference(settling, 5, 4)).toBe('20\u00A0% short')
    expect(estimateDifference(settling, 1, 4)).toBe('300\u00A0% long')
    expect(estimateDifference(settling, 4.1, 4)).toBeNull()
    expect(estimateDifference(settling, 0, 4)).toBeNull()
    expect(estimateDifference(settling, null, 4)).toBeNull()
    expect(estimateDifference(settling, 4, null)).toBeNull()
  })

  it('sets hyphens before figures as minus signs, and no other', () => {
    expect(withTrueMinus('The zero at -4.1 adds to the second-order estimate.')).toBe('The zero at \u22124.1 adds to the second-order estimate.')
  })

  it('lists the gains that reach a point in their own order, whichever is chosen', () => {
    const [first, second] = [{ kp: 1, ki: 2, kd: 3 }, { kp: 4, ki: 5, kd: 6 }]
    const words = ['kp 1.00, ki 2.00, kd 3.00', 'kp 4.00, ki 5.00, kd 6.00']
    const told = (solution: { gains: object, alternatives: object[] }, wanted?: number) =>
      gainChoices(solution as Parameters<typeof gainChoices>[0], wanted).map(({ words, chosen }) => [words, chosen])
    expect(told({ gains: first, alternatives: [second] })).toEqual([[words[0], true], [words[1], false]])
    expect(told({ gains: second, alternatives: [first] }, 1)).toEqual([[words[0], false], [words[1], true]])
    // Asked for a third where there are two: the first is what was given.
    expect(told({ gains: first, alternatives: [second] }, 2)).toEqual([[words[0], true], [words[1], false]])
  })

  it('tells the steady state, infinite constants and growing errors in words', () => {
    const steadyState = { type: 1, positionConstant: null, velocityConstant: 2, accelerationConstant: 0, errorParabola: null }
    const readings = { steadyStateErrorStep: 0, steadyStateErrorRamp: 0.5 } as Readings
    const shown = (stable: boolean) => steadyStateRows({ steadyState, readings: stable ? readings : { ...readings, steadyStateErrorStep: null, steadyStateErrorRamp: null }, stable }).map(row => row.shown)
    expect(shown(true)).toEqual(['1', 'infinite', '2.000\u00A01/s', '0', '0', '0.5000', 'grows'])
    expect(shown(false)).toEqual(['1', 'infinite', '2.000\u00A01/s', '0', '–', '–', '–'])
  })

  it('says what is uncertain, and keeps still where nothing is', () => {
    expect(uncertaintySentence({ uncertain: [] })).toBeNull()
    expect(uncertaintySentence({ uncertain: ['closedLoopPoles'] })).toMatch(/^The roots are uncertain/)
    expect(uncertaintySentence({ uncertain: ['closedLoopPoles', 'settlingTime'] })).toMatch(/^Figures marked \? are uncertain/)
    expect(uncertaintySentence({ uncertain: ['closedLoopPoles', 'stable', 'settlingTime'] })).toMatch(/rounding decides whether the loop is stable/)
  })

  it('tells negative gains in words, places of a lead left out', () => {
    expect(negativeGainSentence({ kp: -1, kd: 2 })).toBe('kp is negative: this point asks for positive feedback.')
    expect(negativeGainSentence({ kp: -1, ki: -2 })).toBe('kp and ki are negative: this point asks for positive feedback.')
    expect(negativeGainSentence({ k: 3, zero: -1, pole: -10 })).toBeNull()
  })

  it('writes spans of time in the unit in which they are spoken of', () => {
    expect([1.5, 1, 0.99999, 0.002, 0.0000505, 2e-7, 86400].map(formatSpan).map(text => text.replace('\u00A0', ' ')))
      .toEqual(['1.5 s', '1 s', '1 s', '2 ms', '50.5 µs', '2e\u22127 s', '86400 s'])
  })

  it('tells in few words what stands between controller and plant', () => {
    const plant = { form: 'coefficients' as const, numerator: [1], denominator: [1, 0] }
    expect(actuationSummary({ plant })).toBeNull()
    expect(actuationSummary({ plant, deadTime: 0 })).toBeNull()
    expect(actuationSummary({ plant, deadTime: 0.002, actuatorLimit: 5, samplePeriod: 0.001 })).toBe('dead time 2\u00A0ms, limit 5, every 1\u00A0ms')
    expect(actuationSummary({ plant, samplePeriod: 0.5, computingDelay: 'one-sample' })).toBe('every 500\u00A0ms, output one sample later')
  })

  it('names fields as the bench does', () => {
    expect(['deadTime', 'actuatorLimit', 'samplePeriod', 'computingDelay'].map(field => sayField(`loop.${field}`)))
      .toEqual(['Dead time', 'Actuator limit', 'Sample period', 'Computing delay'])
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
    const other = { ...document, controller: { form: 'lead' as const, poleZeroRatio: 8, alternative: 1 }, designPoint: { re: -1, im: 0.5 }, requirements: document.requirements.slice(0, 2) }
    expect(differences(mine, { ...mine, machine: '', document: other })).toEqual([
      { what: 'Machine', mine: 'Quay crane 2', theirs: 'none' },
      { what: 'Design point', mine: '−0.5783 + 0.7711j (damping ratio 0.6, 0.9639 rad/s)', theirs: '−1.000 + 0.5000j (damping ratio 0.8944, 1.118 rad/s)' },
      { what: 'Controller', mine: 'one gain, k', theirs: 'lead, pole-zero ratio 8, gains 2 of those that reach the point' },
      {
        what: 'Requirements',
        mine: 'overshoot at most 12\u00A0%; settling time at most 7\u00A0s; phase margin at least 55°; gain margin at least 12\u00A0dB; ramp error at most 1.5\u00A0s',
        theirs: 'overshoot at most 12\u00A0%; settling time at most 7\u00A0s',
      },
    ])
  })
})

describe('two versions of a loop', () => {
  it('differ in what stands between controller and plant', () => {
    const { title, machine, axis, document } = demoScenario
    const mine = { title, machine, axis, document }
    const loop = { ...document.loop, deadTime: 0.002, actuatorLimit: 5, samplePeriod: 0.001, computingDelay: 'one-sample' as const }
    expect(differences(mine, { ...mine, document: { ...document, loop } })).toEqual([
      { what: 'Dead time', mine: 'none', theirs: '2\u00A0ms' },
      { what: 'Actuator limit', mine: 'none', theirs: '5' },
      { what: 'Sample period', mine: 'none, a continuous controller', theirs: '1\u00A0ms' },
      { what: 'Computing delay', mine: 'none', theirs: 'one sample' },
    ])
    // A dead time of 0 is none.
    expect(differences(mine, { ...mine, document: { ...document, loop: { ...document.loop, deadTime: 0 } } })).toEqual([])
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
