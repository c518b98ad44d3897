import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { DesignSolution, FrequencyResponse, LoopAnalysis } from '#shared/control/types'
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

describe('POST /api/loop/analyze', () => {
  it('answers with the locus and its facts', async () => {
    const { status, body } = await client.post<LoopAnalysis>('/api/loop/analyze', { loop, controller: { form: 'gain' }, dampingRatio: 0.5 })
    expect(status).toBe(200)
    expect(body.asymptotes).toEqual({ centroid: -1, anglesDeg: [60, 180, 300].map(angle => expect.closeTo(angle, 9)) })
    expect(body.stableGain).toEqual([[0, expect.closeTo(6, 9)]])
    expect(body.branches).toHaveLength(3)
    expect(body.rayIntersections).toEqual([{ point: { re: expect.closeTo(-1 / 3, 10), im: expect.closeTo(1 / Math.sqrt(3), 10) }, gain: expect.closeTo(28 / 27, 10) }])
  })

  it('answers with the locus of a loop with dead time: crossings to the border of stability, no asymptotes', async () => {
    const { body } = await client.post<LoopAnalysis>('/api/loop/analyze', { loop: { plant: { form: 'coefficients', numerator: [1], denominator: [1, 0] }, deadTime: 2 }, controller: { form: 'gain' }, dampingRatio: 0.5 })
    expect(body.openLoop.deadTime).toBe(2)
    expect(body.asymptotes).toBeNull()
    // k e^(-2s)/s: unstable from k = pi/4 on, breakaway at s = -1/2 (K = 1/(2 e)).
    expect(body.stableGain).toEqual([[0, expect.closeTo(Math.PI / 4, 11)]])
    expect(body.imaginaryAxisCrossings[0]).toEqual({ frequency: expect.closeTo(Math.PI / 4, 11), gain: expect.closeTo(Math.PI / 4, 11) })
    expect(body.breakaways).toEqual([{ point: { re: expect.closeTo(-0.5, 11), im: 0 }, gain: expect.closeTo(1 / (2 * Math.E), 11) }])
    expect(body.branches.length).toBeGreaterThanOrEqual(2)
  })

  it('needs the present gains of a form that has several', async () => {
    const without = await client.post<ErrorBody>('/api/loop/analyze', { loop, controller: { form: 'pd' } })
    expect([without.status, without.body.data?.issues?.[0]?.path]).toEqual([422, 'gains'])
    expect((await client.post('/api/loop/analyze', { loop, controller: { form: 'pd' }, gains: { kp: 1, kd: 2 } })).status).toBe(200)
  })
})

describe('POST /api/loop/frequency', () => {
  const { designPoint: _, ...present } = { ...good, gains: { k: 6 } }

  // 6/(s (s + 1) (s + 2)) stands on the border of stability: L(j sqrt 2) = -1 (Ogata, Example 6-1).
  it('answers with L, S and T over frequency, under the names of docs/http-contract.md', async () => {
    const { status, body } = await client.post<FrequencyResponse>('/api/loop/frequency', { ...present, from: Math.SQRT2, to: 10, samples: 50 })
    expect(status).toBe(200)
    expect(Object.keys(body).sort()).toEqual(['complementaryDb', 'frequency', 'magnitudeDb', 'phaseDeg', 'sensitivityDb', 'sensitivityPeakFrequency'])
    const lists = [body.frequency, body.magnitudeDb, body.phaseDeg, body.sensitivityDb, body.complementaryDb]
    expect(new Set(lists.map(list => list.length)).size).toBe(1)
    expect(lists.flat().every(Number.isFinite)).toBe(true)
    expect([body.frequency[0], body.frequency.at(-1)]).toEqual([Math.SQRT2, 10])
    expect([body.magnitudeDb[0], body.phaseDeg[0]]).toEqual([expect.closeTo(0, 9), expect.closeTo(-180, 9)])
    expect(body.sensitivityPeakFrequency).toBeNull()
  })

  it('finds the gains of a design point, and says where |S| is largest', async () => {
    const { status, body } = await client.post<FrequencyResponse>('/api/loop/frequency', good)
    expect(status).toBe(200)
    const solved = (await client.post<DesignSolution>('/api/design/solve', good)).body.readings
    expect([body.frequency[0], body.frequency.at(-1)]).toEqual([0.1, 10])
    expect(Math.max(...body.sensitivityDb)).toBeCloseTo(20 * Math.log10(solved.sensitivityPeak!), 3)
    expect(body.frequency[body.sensitivityDb.indexOf(Math.max(...body.sensitivityDb))]! / body.sensitivityPeakFrequency!).toBeCloseTo(1, 1)
  })

  it.each<[string, object, number, string]>([
    ['an unknown field', { colour: 'red' }, 400, 'colour'],
    ['a range that ends before it begins', { from: 10, to: 1 }, 400, 'to'],
    ['an empty range', { from: 10, to: 10 }, 400, 'to'],
    ['a frequency of 0', { from: 0 }, 400, 'from'],
    ['a frequency beyond any machine', { to: 1e13 }, 400, 'to'],
    ['too few samples', { samples: 19 }, 400, 'samples'],
    ['too many samples', { samples: 2001 }, 400, 'samples'],
    ['half a sample', { samples: 20.5 }, 400, 'samples'],
    ['neither point nor gains', { gains: undefined }, 400, 'designPoint'],
    ['gains of another form', { gains: { kp: 1, ki: 1 } }, 400, 'gains'],
    ['a plant without a denominator', { loop: { plant: { form: 'coefficients', numerator: [1], denominator: [0] } } }, 400, 'loop.plant.denominator'],
    ['a gain of zero', { gains: { k: 0 } }, 422, 'gains'],
    ['an algebraic loop', { loop: { plant: { form: 'coefficients', numerator: [-1, 0], denominator: [1, 1] } }, gains: { k: 1 } }, 422, ''],
  ])('%s is refused by field and reason', async (_what, fields, status, path) => {
    const answer = await client.post<ErrorBody>('/api/loop/frequency', { ...present, ...fields })
    expect(answer.status).toBe(status)
    expect(answer.body.message.length).toBeGreaterThan(10)
    if (path !== '') expect(answer.body.data?.issues?.map(issue => issue.path)).toContain(path)
  })

  it('answers at the limits: order 20, 2000 samples, poles on the axis, figures of any size', async () => {
    const resonant = Array.from({ length: 10 }, (_, n) => ({ re: 0, im: n + 1 })).flatMap(({ re, im }) => [{ re, im }, { re, im: -im }])
    for (const plant of [
      { form: 'zeros-poles-gain', zeros: [], poles: resonant, gain: 1 },
      { form: 'coefficients', numerator: [1e100], denominator: [1e-100, 1] },
    ]) {
      const { status, body } = await client.post<FrequencyResponse>('/api/loop/frequency', { ...present, loop: { plant }, gains: { k: 1 }, samples: 2000 })
      expect(status).toBe(200)
      expect([body.frequency, body.magnitudeDb, body.phaseDeg, body.sensitivityDb, body.complementaryDb].flat().every(Number.isFinite)).toBe(true)
      expect(Math.max(...body.magnitudeDb)).toBeLessThanOrEqual(400)
    }
  })

  it.each([1e150, 1e300, 1e308])('answers over frequency with numbers or refuses, whatever the sample period: %s s', async (samplePeriod) => {
    const answer = await client.post<FrequencyResponse>('/api/loop/frequency', { ...good, loop: { ...loop, samplePeriod } })
    expect([200, 422]).toContain(answer.status)
    if (answer.status === 200) expect(answer.body.phaseDeg.every(Number.isFinite)).toBe(true)
  })
})
