import autocannon from 'autocannon'
import { loopOfOrder } from './loops.mjs'

const seconds = 4

/** Latency and throughput of a solve with 400 samples, from 1, 10 and 25 callers on kept connections. */
export async function benchHttp(origin) {
  const rows = []
  for (const order of [3, 6]) {
    for (const connections of [1, 10, 25]) {
      const { plant } = loopOfOrder(order)
      const body = JSON.stringify({
        loop: { plant: { form: 'coefficients', ...plant } }, controller: { form: 'gain' }, designPoint: { re: -0.4, im: 0.6 },
      })
      const load = duration => autocannon({
        url: `${origin}/api/design/solve`, method: 'POST', headers: { 'content-type': 'application/json' }, body, connections, duration,
      })
      await load(1)
      const result = await load(seconds)
      rows.push({
        'order': order, 'callers': connections, 'median ms': result.latency.p50, 'p97.5 ms': result.latency.p97_5, 'p99 ms': result.latency.p99,
        'requests/s': Math.round(result.requests.average), 'errors': result.errors + result.non2xx,
      })
    }
  }
  return rows
}
