import { readFileSync } from 'node:fs'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { DesignSolution } from '#shared/control/types'
import type { SolveAnswer } from '#shared/schemas/design'
import type { ErrorBody } from '#shared/schemas/errors'
import { Client } from '../helpers/client'
import { startServer, type RunningServer } from '../helpers/server'

let server: RunningServer
let client: Client

beforeAll(async () => {
  server = await startServer()
  client = new Client(server.origin)
})
afterAll(() => server.stop())

const loop = { plant: { form: 'coefficients', numerator: [1], denominator: [1, 3, 2, 0] } }
const good = { loop, controller: { form: 'gain' }, designPoint: { dampingRatio: 0.5, naturalFrequency: 2 / 3 } }

describe('POST /api/design/solve', () => {
  // Ogata, Modern Control Engineering, 5th ed., Example 6-1 (published.json B01; printed figures partly read, partly from memory).
  it('answers with the gain of the magnitude condition and the readings, under the names of docs/http-contract.md', async () => {
    const answer = await client.post<DesignSolution>('/api/design/solve', {
      ...good, requirements: [{ reading: 'overshootPercent', limit: 'at-most', value: 20 }, { reading: 'gainMarginDb', limit: 'at-least', value: 20 }],
    })
    expect(answer.status).toBe(200)
    expect(answer.body.gains).toEqual({ k: expect.closeTo(28 / 27, 10) })
    expect(answer.body.onLocus).toBe(true)
    expect(Object.keys(answer.body).sort()).toEqual([
      'alternatives', 'closedLoopPoles', 'closedLoopZeros', 'designPoint', 'dominance', 'estimate', 'gainUnits', 'gains', 'leftoverAngleDeg', 'onLocus',
      'readings', 'response', 'stable', 'steadyState', 'uncertain', 'unmet', 'verdicts',
    ])
    expect(Object.keys(answer.body.dominance!).sort()).toEqual(['nearestZeroDistance', 'nextPoleRatio', 'residueShare', 'sentence'])
    expect(Object.keys(answer.body.steadyState).sort()).toEqual(['accelerationConstant', 'errorParabola', 'positionConstant', 'type', 'velocityConstant'])
    expect(Object.keys(answer.body.readings).sort()).toEqual([
      'bandwidth', 'delayMargin', 'finalValue', 'gainCrossover', 'gainMargin', 'gainMarginDb', 'overshootPercent', 'peakEffort', 'peakTime',
      'phaseCrossover', 'phaseMarginDeg', 'riseTime', 'sensitivityPeak', 'settlingTime', 'steadyStateErrorRamp', 'steadyStateErrorStep',
    ])
    expect(answer.body.verdicts.map(verdict => verdict.met)).toEqual([true, false])
    expect(answer.body.unmet).toBe(1)
    expect(answer.body.response.time).toHaveLength(400)
  })

  it('evaluates given gains, and an unstable design is an answer', async () => {
    const { designPoint: _, ...rest } = good
    const answer = await client.post<DesignSolution>('/api/design/solve', { ...rest, gains: { k: 12 } })
    expect(answer.status).toBe(200)
    expect(answer.body).toMatchObject({ stable: false, gains: { k: 12 }, readings: { overshootPercent: null, settlingTime: null } })
    expect(answer.body.readings.gainMarginDb).toBeCloseTo(-20 * Math.log10(2), 9)
  })

  // The third root of s³ + 3 s² + 2 s + 28/27 lies at -7/3, seven times as far left as the pair; Kv = (28/27)/2.
  it('tells how far the pair speaks for the loop, type and error constants', async () => {
    const { body } = await client.post<DesignSolution>('/api/design/solve', good)
    expect(body.dominance).toMatchObject({ nextPoleRatio: expect.closeTo(7, 8), nearestZeroDistance: null })
    expect(body.dominance!.residueShare).toBeGreaterThan(0.9)
    expect(body.dominance!.sentence).toMatch(/^The .+\.$/)
    expect(body.steadyState).toEqual({ type: 1, positionConstant: null, velocityConstant: expect.closeTo(14 / 27, 10), accelerationConstant: 0, errorParabola: null })
  })

  it('gives the one of several gains that is asked for, and refuses what no form has', async () => {
    const double = { plant: { form: 'coefficients', numerator: [1], denominator: [1, 0, 0] } }
    const solve = (alternative?: number) => client.post<DesignSolution & ErrorBody>('/api/design/solve', {
      loop: double, controller: { form: 'pid', integralToDerivativeRatio: 4, alternative }, designPoint: { re: -1, im: 1 },
    })
    const [first, second, beyond] = [await solve(), await solve(1), await solve(3)]
    expect(first.body.alternatives).toHaveLength(1)
    expect(second.body).toMatchObject({ gains: first.body.alternatives[0], alternatives: [first.body.gains] })
    expect(beyond.body.gains).toEqual(first.body.gains)
    for (const alternative of [4, -1, 0.5]) {
      const { status, body } = await solve(alternative)
      expect([status, body.data?.issues?.map(issue => issue.path)]).toEqual([400, ['controller.alternative']])
    }
    const answer = await client.post<ErrorBody>('/api/design/solve', { ...good, controller: { form: 'pi', alternative: 1 } })
    expect(answer.status).toBe(400)
  })

  it('answers for a loop with dead time, sampling and a limit, the continuous design beside it', async () => {
    const solve = async (part: object) => (await client.post<SolveAnswer>('/api/design/solve', { ...good, loop: { ...loop, ...part } })).body
    const plain = await solve({})
    const late = await solve({ deadTime: 0.2 })
    expect(late.leftoverAngleDeg).toBeCloseTo(-0.2 * plain.designPoint.im * 180 / Math.PI, 9)
    expect(late.readings.phaseMarginDeg).toBeLessThan(plain.readings.phaseMarginDeg!)
    expect(late.dominance!.sentence).toMatch(/dead time|pair/)
    const sampled = await solve({ samplePeriod: 0.4, computingDelay: 'one-sample' })
    expect(sampled.gains).toEqual(plain.gains)
    expect(sampled.continuous!.readings.overshootPercent).toBeCloseTo(plain.readings.overshootPercent!, 9)
    expect(sampled.continuous!.response.time).toEqual(sampled.response.time)
    expect(sampled.readings.overshootPercent).toBeGreaterThan(plain.readings.overshootPercent! + 5)
    const limited = await solve({ actuatorLimit: 0.5 })
    expect(limited.readings.peakEffort).toBeCloseTo(0.5, 12)
    expect(limited.response.limitedUntil).toBeGreaterThan(0)
    expect(plain.response).not.toHaveProperty('limitedUntil')
    expect(plain).not.toHaveProperty('continuous')
  })

  it('takes the plant as a formula with named parameters', async () => {
    const plant = { form: 'expression', expression: 'k0/(s·(s+1)·(s+p))', parameters: { k0: { value: 1, unit: 'rad/s' }, p: { value: 2, tolerancePercent: 10 } } }
    const answer = await client.post<DesignSolution>('/api/design/solve', { ...good, loop: { plant } })
    expect(answer.body.gains).toEqual({ k: expect.closeTo(28 / 27, 10) })
  })

  it('means each parameter in its unit, and answers with the units of the gains', async () => {
    const plant = (tau: object) => ({ form: 'expression', expression: 'kv/(s*(tau*s + 1))', parameters: { kv: { value: 4, unit: 'rad/(s V)' }, tau } })
    const ask = (tau: object) => client.post<SolveAnswer>('/api/design/solve', { loop: { plant: plant(tau) }, controller: { form: 'pd' }, designPoint: { re: -20, im: 15 } })
    const [inMilliseconds, inSeconds] = [await ask({ value: 20, unit: 'ms' }), await ask({ value: 0.02 })]
    expect(inMilliseconds.status).toBe(200)
    expect(inMilliseconds.body.gains).toEqual(inSeconds.body.gains)
    expect(inMilliseconds.body.gainUnits).toEqual({ kp: 'V', kd: 'V s' })
    expect(inSeconds.body.gainUnits).toEqual({ kp: null, kd: null })
  })

  it('agrees over HTTP with the values in 50-digit arithmetic', async () => {
    const cases = JSON.parse(readFileSync(new URL('../fixtures/loops-50-digit.json', import.meta.url), 'utf8')) as {
      oneGain: { plant: object, shape: object, designPoint: object, gain: number, figures: { overshootPercent: number } }[]
    }
    for (const one of cases.oneGain.slice(0, 12)) {
      const { body } = await client.post<DesignSolution>('/api/design/solve', {
        loop: { plant: one.plant }, controller: { form: 'gain', shape: one.shape }, designPoint: one.designPoint,
      })
      expect(Math.abs((body.gains as { k: number }).k / one.gain - 1)).toBeLessThan(1e-10)
      expect(body.readings.overshootPercent).toBeCloseTo(one.figures.overshootPercent, 6)
    }
  })
})

describe('bad input', () => {
  const plant = (fields: object) => ({ ...good, loop: { plant: { ...loop.plant, ...fields } } })
  const formula = (expression: string) => ({ ...good, loop: { plant: { form: 'expression', expression, parameters: {} } } })

  it.each<[string, unknown, number, string]>([
    ['an unknown field', { ...good, colour: 'red' }, 400, 'colour'],
    ['an unknown field inside', plant({ order: 3 }), 400, 'loop.plant.order'],
    ['a number as text', plant({ numerator: ['1'] }), 400, 'loop.plant.numerator.0'],
    ['no number', plant({ numerator: [null] }), 400, 'loop.plant.numerator.0'],
    ['a zero numerator', plant({ numerator: [0] }), 400, 'loop.plant.numerator'],
    ['a zero denominator', plant({ denominator: [0, 0] }), 400, 'loop.plant.denominator'],
    ['an empty list', plant({ denominator: [] }), 400, 'loop.plant.denominator'],
    ['an improper plant', plant({ numerator: [1, 0, 0, 0, 0] }), 400, 'loop.plant.numerator'],
    ['an order beyond the limit', plant({ denominator: Array(22).fill(1) }), 400, 'loop.plant.denominator'],
    ['a formula with an unknown symbol', formula('1/(s*q)'), 400, 'loop.plant.expression'],
    ['a formula nested too deep', formula(`${'('.repeat(60)}1${')'.repeat(60)}/s`), 400, 'loop.plant.expression'],
    ['a formula that is too long', formula(`1/s${'+1'.repeat(300)}`), 400, 'loop.plant.expression'],
    ['an algebraic loop', { ...good, loop: { plant: { form: 'coefficients', numerator: [-1, 0], denominator: [1, 1] } }, designPoint: undefined, gains: { k: 1 } }, 422, ''],
    ['a design point below the axis', { ...good, designPoint: { re: -1, im: -1 } }, 400, 'designPoint.im'],
    ['a damping ratio beyond 1', { ...good, designPoint: { dampingRatio: 1.5, naturalFrequency: 1 } }, 400, 'designPoint.dampingRatio'],
    ['neither point nor gains', { ...good, designPoint: undefined }, 400, 'designPoint'],
    ['gains of another form', { ...good, designPoint: undefined, gains: { kp: 1, kd: 1 } }, 400, 'gains'],
    ['too many samples', { ...good, response: { samples: 2001 } }, 400, 'response.samples'],
    ['an unknown reading', { ...good, requirements: [{ reading: 'colour', limit: 'at-most', value: 1 }] }, 400, 'requirements.0.reading'],
    ['too many requirements', { ...good, requirements: Array(17).fill({ reading: 'riseTime', limit: 'at-most', value: 1 }) }, 400, 'requirements'],
    ['a PID with two third conditions', { ...good, controller: { form: 'pid', thirdPole: -3, integralToDerivativeRatio: 4 } }, 400, 'controller'],
    ['a negative dead time', { ...good, loop: { ...loop, deadTime: -0.1 } }, 400, 'loop.deadTime'],
    ['a sample period of nothing', { ...good, loop: { ...loop, samplePeriod: 0 } }, 400, 'loop.samplePeriod'],
    ['a computing delay without sampling', { ...good, loop: { ...loop, computingDelay: 'none' } }, 400, 'loop.computingDelay'],
    ['a limit of nothing', { ...good, loop: { ...loop, actuatorLimit: 0 } }, 400, 'loop.actuatorLimit'],
    ['a dead time of a thousand samples', { ...good, loop: { ...loop, deadTime: 1, samplePeriod: 0.001 } }, 422, 'loop.samplePeriod'],
    ['a lead that cannot reach the point', { ...good, controller: { form: 'lead', poleZeroRatio: 1.0001 }, designPoint: { re: -0.1, im: 9 } }, 422, ''],
  ])('%s is refused by field and reason', async (_what, body, status, path) => {
    const answer = await client.post<ErrorBody>('/api/design/solve', body)
    expect(answer.status).toBe(status)
    expect(answer.body.statusCode).toBe(status)
    expect(answer.body.message.length).toBeGreaterThan(10)
    if (path !== '') expect(answer.body.data?.issues?.map(issue => issue.path)).toContain(path)
  })

  it('points at the character of a formula', async () => {
    const answer = await client.post<ErrorBody>('/api/design/solve', formula('1/(s*q)'))
    expect(answer.body.data?.issues).toEqual([{ path: 'loop.plant.expression', message: 'q is not among the parameters', position: 5 }])
  })

  it('points at unlike terms, in the plant and in the sensor', async () => {
    const plant = { form: 'expression', expression: 'kt/(J*s^2+b)', parameters: { kt: { value: 1, unit: 'Nm/A' }, J: { value: 2, unit: 'kg m^2' }, b: { value: 1, unit: 'N m s' } } }
    for (const [where, wrong] of [['loop.plant', { plant }], ['loop.sensor', { plant: loop.plant, sensor: plant }]] as const) {
      const answer = await client.post<ErrorBody>('/api/design/solve', { ...good, loop: wrong })
      expect(answer.status).toBe(400)
      expect(answer.body.data?.issues).toEqual([
        { path: `${where}.expression`, message: 'J*s^2 is in N m, b in N m s: unlike terms cannot be added', position: 10 },
      ])
    }
  })

  it.each(['__proto__', 'constructor', '1e999 m', 'm^1e9', '('.repeat(32), 'degC', '{{7*7}}', 'Ym^9 Ym^9 Ym^9', '\\u0000', '%00', '💥'.repeat(8)])('the unit %j is refused at its field', async (unit) => {
    const plant = { form: 'expression', expression: 'k/(s*(s+1))', parameters: { k: { value: 1, unit } } }
    const toAnalyze = { loop: { plant }, controller: { form: 'gain' } }
    for (const [path, body] of [['design/solve', { ...good, ...toAnalyze }], ['design/gain-window', { ...good, ...toAnalyze }], ['loop/analyze', toAnalyze]] as const) {
      const answer = await client.post<ErrorBody>(`/api/${path}`, body)
      expect([answer.status, answer.body.data?.issues?.map(issue => issue.path)]).toEqual([400, ['loop.plant.parameters.k.unit']])
    }
  })

  it.each(['', '{', '{"loop": NaN}', '[1e999]', 'null', '"text"', '{"__proto__": {"loop": 1}}'])('the text %j is refused', async (text) => {
    const answer = await client.raw<ErrorBody>('POST', '/api/design/solve', text, { 'content-type': 'application/json' })
    expect(answer.status).toBe(400)
    expect(JSON.stringify(answer.body)).not.toMatch(/\.mjs|\.ts:|\\n +at /)
  })

  it('refuses numbers that overflow to infinity', async () => {
    const text = JSON.stringify(good).replace('0.5', '1e999')
    const answer = await client.raw<ErrorBody>('POST', '/api/design/solve', text, { 'content-type': 'application/json' })
    expect([answer.status, answer.body.data?.issues?.[0]?.path]).toEqual([400, 'designPoint.dampingRatio'])
  })
})
