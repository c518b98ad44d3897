import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { root } from '../prepare.mjs'
import { loadEngine } from './engine.mjs'

const requirements = [
  { reading: 'overshootPercent', limit: 'at-most', value: 20 }, { reading: 'settlingTime', limit: 'at-most', value: 5 },
  { reading: 'phaseMarginDeg', limit: 'at-least', value: 40 }, { reading: 'sensitivityPeak', limit: 'at-most', value: 2 },
]
const rounds = 3

/**
 * The dearest solve, analysis and gain window over the loops of tests/fixtures/hostile-loops.json (order 40, thirty decades, heaps of equal roots): what
 * bounded work comes to on this machine. Of each loop the best of three runs, so that a busy machine shows less.
 */
export async function benchHostile() {
  const engine = await loadEngine()
  const loops = JSON.parse(readFileSync(join(root, 'tests', 'fixtures', 'hostile-loops.json'), 'utf8'))
  const works = {
    'solve': ({ plant, gain }) => engine.solveDesign({ plant, rateFeedback: 0 }, { form: 'gain' }, { gains: { k: gain } }, { requirements }),
    'analyze': ({ plant }) => engine.analyzeLoop({ plant, rateFeedback: 0 }, { form: 'gain' }, { dampingRatio: 0.5 }),
    'gain window': ({ plant, gain }) => engine.gainWindow({ plant, rateFeedback: 0 }, { form: 'gain' }, { k: gain }, requirements),
  }
  return Object.entries(works).map(([what, work]) => {
    const times = loops.map(loop => ({ kind: loop.kind, ms: bestOf(() => work(loop)) })).sort((a, b) => b.ms - a.ms)
    return { what, 'loops': times.length, 'median': times[times.length >> 1].ms, 'worst': times[0].ms, 'dearest loop': times[0].kind }
  })
}

function bestOf(work) {
  let best = Infinity
  for (let n = 0; n < rounds; n += 1) {
    const started = performance.now()
    try {
      work()
    } catch {
      // Refusing takes its time, too.
    }
    best = Math.min(best, performance.now() - started)
  }
  return best
}
