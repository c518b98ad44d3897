import { bestPoint } from '#shared/control/best-point'
import type { BestPoint, SearchProgress } from '#shared/control/best-point/types'
import { bestBodySchema, type BestLine } from '#shared/schemas/best'
import { readValidated } from '../../utils/body'
import { designTarget } from '../../utils/design-target'
import { compute, limitCompute, limitSearches } from '../../utils/limits'
import { sendLines } from '../../utils/lines'
import { resolveController, resolveLoop } from '../../utils/loop-model'
import { inStretches } from '../../utils/stepwise'

/** Computing time after which a search ends with what it has found. */
const mostMs = 15_000
/** Progress is told this often: what an eye can follow. */
const betweenLinesMs = 100

export default defineEventHandler(async (event) => {
  await limitCompute(event)
  const body = await readValidated(event, bestBodySchema)
  const leave = limitSearches(event)
  try {
    const { over, requirements, response } = body
    const search = await compute(event, () =>
      bestPoint(resolveLoop(body.loop), resolveController(body.controller), designTarget(body), { over, requirements, response }))
    await sendLines(event, linesOf(inStretches(event, search, mostMs)))
  } finally {
    leave()
  }
})

async function* linesOf(search: AsyncGenerator<SearchProgress, BestPoint>): AsyncGenerator<BestLine> {
  let told = -Infinity
  for (;;) {
    const step = await search.next()
    if (step.done) return void (yield { result: step.value })
    if (performance.now() - told < betweenLinesMs) continue
    told = performance.now()
    const { share, evaluations, best } = step.value
    yield { progress: share, evaluations, best: best && { designPoint: best.designPoint, settlingTime: best.settlingTime } }
  }
}
