import { afterAll, beforeAll, expect, it } from 'vitest'
import { Client } from '../helpers/client'
import { seededRandom } from '../helpers/random'
import { startServer, type RunningServer } from '../helpers/server'

let server: RunningServer

beforeAll(async () => { server = await startServer() })
afterAll(() => server.stop())

const seed = 20_261
const rounds = 10_000

/** Extremes of every kind that JSON can carry. */
const oddValues = [
  null, true, '', 'x', '1/s', -1, 0, 1e308, -1e308, 5e-324, 1e-300, 0.5, [], {}, [[]], [null], { re: 1 }, Array(50).fill(1), Array(21).fill(1e300), 'ζ'.repeat(600),
]

it('answers ten thousand spoiled bodies without a server error, and serves on', async () => {
  const random = seededRandom(seed)
  const pick = <T>(list: readonly T[]) => list[Math.floor(random() * list.length)] as T
  const client = new Client(server.origin)

  function spoil(value: unknown): unknown {
    if (Array.isArray(value)) return random() < 0.15 ? pick(oddValues) : value.map(spoil)
    if (value === null || typeof value !== 'object') return random() < 0.1 ? pick(oddValues) : value
    const entries = Object.entries(value).filter(() => random() > 0.04).map(([key, inner]) => [key, random() < 0.05 ? pick(oddValues) : spoil(inner)])
    if (random() < 0.03) entries.push([pick(['extra', 'constructor', 'loop']), pick(oddValues)])
    return Object.fromEntries(entries)
  }

  const coefficient = () => (random() - 0.4) * 10 ** (random() * 12 - 6)
  const coefficients = (n: number) => Array.from({ length: n }, coefficient)
  const body = () => {
    const order = 1 + Math.floor(random() * 8)
    return {
      loop: {
        plant: pick<object>([
          { form: 'coefficients', numerator: coefficients(1 + Math.floor(random() * order)), denominator: coefficients(order + 1) },
          { form: 'expression', expression: pick(['a/(s*(b*s+1))', '1/s^2', '(s+a)/(s^2-b)', '1/(s*(']), parameters: { a: { value: coefficient() }, b: { value: coefficient() } } },
          { form: 'zeros-poles-gain', zeros: [], poles: [{ re: coefficient(), im: 0 }, { re: 0, im: 0 }], gain: coefficient() },
        ]),
        rateFeedback: random() < 0.2 ? coefficient() : 0,
      },
      controller: pick<object>([{ form: 'gain' }, { form: 'gain', shape: { numerator: coefficients(2), denominator: coefficients(2) } },
        { form: 'pd' }, { form: 'pi' }, { form: 'rate' }, { form: 'lead', poleZeroRatio: 1 + random() * 20 }]),
      designPoint: { re: coefficient(), im: Math.abs(coefficient()) },
      requirements: [{ reading: 'overshootPercent', limit: 'at-most', value: 10 }],
      response: { input: pick(['reference-step', 'reference-ramp', 'disturbance-step']), samples: 50 },
    }
  }

  const statuses = new Map<number, number>()
  for (let round = 0; round < rounds; round += 1) {
    const whole = body()
    const sent = random() < 0.5 ? whole : spoil(whole)
    const path = pick(['/api/design/solve', '/api/loop/analyze'])
    const { requirements: _r, response: _s, designPoint: _d, ...analyzed } = whole
    const answer = await client.post<{ statusCode?: number }>(path, path === '/api/loop/analyze' && sent === whole ? analyzed : sent)
    statuses.set(answer.status, (statuses.get(answer.status) ?? 0) + 1)
    if (![200, 400, 422].includes(answer.status)) throw new Error(`${answer.status} for ${JSON.stringify(sent)}: ${JSON.stringify(answer.body)}`)
    if (answer.status === 200) expect(JSON.stringify(answer.body)).not.toMatch(/NaN|Infinity/)
  }
  expect(statuses.get(200)).toBeGreaterThan(rounds / 10)
  expect(statuses.get(400)).toBeGreaterThan(rounds / 10)
  expect((await client.get('/api/health')).status).toBe(200)
}, 120_000)
