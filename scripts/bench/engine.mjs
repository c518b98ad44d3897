import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { pathToFileURL } from 'node:url'
import { build } from 'esbuild'
import { root } from '../prepare.mjs'
import { loopOfOrder } from './loops.mjs'
import { spread } from './table.mjs'

const rounds = { warm: 60, timed: 400 }
const requirements = [
  { reading: 'overshootPercent', limit: 'at-most', value: 10 }, { reading: 'settlingTime', limit: 'at-most', value: 5 },
  { reading: 'phaseMarginDeg', limit: 'at-least', value: 50 },
]

const sixRequirements = [
  ...requirements, { reading: 'gainMarginDb', limit: 'at-least', value: 8 }, { reading: 'sensitivityPeak', limit: 'at-most', value: 1.8 },
  { reading: 'steadyStateErrorRamp', limit: 'at-most', value: 3 },
]

/** Median and spread of a solve (400 samples, all readings, three requirements) and of an analysis, by order of the plant. */
export async function benchEngine() {
  const engine = await loadEngine()
  const rows = []
  for (const order of [3, 6, 12, 20]) {
    const loop = loopOfOrder(order)
    const point = n => ({ re: -0.3 - (n % 40) / 200, im: 0.4 + (n % 40) / 150 })
    rows.push({ what: `solve, order ${order}`, ...time(n => engine.solveDesign(loop, { form: 'gain' }, { designPoint: point(n) }, { requirements })) })
  }
  for (const order of [3, 6, 12, 20]) {
    const loop = loopOfOrder(order)
    rows.push({ what: `analyze, order ${order}`, ...time(n => engine.analyzeLoop(loop, { form: 'gain' }, { dampingRatio: 0.3 + (n % 40) / 100 })) })
  }
  for (const order of [3, 6, 12, 20]) {
    const loop = loopOfOrder(order)
    const { gains } = engine.solveDesign(loop, { form: 'gain' }, { designPoint: { re: -0.4, im: 0.6 } })
    rows.push({ what: `gain window, order ${order}`, ...time(() => engine.gainWindow(loop, { form: 'gain' }, gains, sixRequirements), { warm: 3, timed: 30 }) })
  }
  return rows
}

const gainForm = { form: 'gain' }
/** What a loop may have beside its poles, each alone. */
const parts = {
  'solve': {},
  'with dead time': { deadTime: 0.05 },
  'sampled': { sampling: { period: 0.02, computingDelay: true } },
  'limited': { actuatorLimit: 0.5 },
}

/** Medians by order: how each kind of answer grows with the loop. */
export async function benchGrowth() {
  const engine = await loadEngine()
  return [2, 4, 6, 8, 10, 12, 16, 20].map((order) => {
    const loop = loopOfOrder(order)
    const point = n => ({ re: -0.3 - (n % 40) / 200, im: 0.4 + (n % 40) / 150 })
    const median = (work, counts) => time(work, counts).median
    const row = { order }
    for (const [name, part] of Object.entries(parts)) {
      row[name] = median(n => engine.solveDesign({ ...loop, ...part }, gainForm, { designPoint: point(n) }, { requirements }), { warm: 20, timed: 80 })
    }
    row.analyze = median(n => engine.analyzeLoop(loop, gainForm, { dampingRatio: 0.3 + (n % 40) / 100 }), { warm: 10, timed: 60 })
    row['analyze, dead time'] = median(n => engine.analyzeLoop({ ...loop, deadTime: 0.05 }, gainForm, { dampingRatio: 0.3 + (n % 40) / 100 }), { warm: 5, timed: 25 })
    const { gains } = engine.solveDesign(loop, gainForm, { designPoint: { re: -0.4, im: 0.6 } })
    row['gain window'] = median(() => engine.gainWindow(loop, gainForm, gains, sixRequirements), { warm: 3, timed: 15 })
    return row
  })
}

function time(work, { warm, timed } = rounds) {
  for (let n = 0; n < warm; n += 1) work(n)
  const times = []
  for (let n = 0; n < timed; n += 1) {
    const started = performance.now()
    work(n)
    times.push(performance.now() - started)
  }
  return spread(times)
}

/** The engine is TypeScript; it is bundled once into a temporary file, as the server's build does. */
export async function loadEngine() {
  const folder = mkdtempSync(join(tmpdir(), 'polewright-engine-'))
  const outfile = join(folder, 'engine.mjs')
  await build({
    stdin: {
      contents: `export { solveDesign } from './shared/control/solve'; export { analyzeLoop } from './shared/control/analyze'; export { gainWindow } from './shared/control/gain-window'`, resolveDir: root,
    },
    bundle: true, format: 'esm', platform: 'node', target: 'node20', outfile, logLevel: 'warning',
  })
  const engine = await import(pathToFileURL(outfile).href)
  rmSync(folder, { recursive: true, force: true })
  return engine
}
