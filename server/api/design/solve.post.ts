import { solveDesign } from '#shared/control/solve'
import { solveBodySchema } from '#shared/schemas/design'
import { readValidated } from '../../utils/body'
import { designTarget } from '../../utils/design-target'
import { compute, limitCompute } from '../../utils/limits'
import { resolveController, resolveLoop } from '../../utils/loop-model'

export default defineEventHandler(async (event) => {
  await limitCompute(event)
  const body = await readValidated(event, solveBodySchema)
  const { requirements, response } = body
  return compute(event, () => solveDesign(resolveLoop(body.loop), resolveController(body.controller), designTarget(body), { requirements, response }))
})
