import { analyzeLoop } from '#shared/control/analyze'
import { analyzeBodySchema } from '#shared/schemas/design'
import { readValidated } from '../../utils/body'
import { compute, limitCompute } from '../../utils/limits'
import { resolveController, resolveLoop } from '../../utils/loop-model'

export default defineEventHandler(async (event) => {
  await limitCompute(event)
  const { loop, controller, dampingRatio, gains } = await readValidated(event, analyzeBodySchema)
  return compute(event, () => analyzeLoop(resolveLoop(loop), resolveController(controller), { dampingRatio, gains }))
})
