import { solveDesign } from '#shared/control/solve'
import { type SolveAnswer, solveBodySchema } from '#shared/schemas/design'
import { readValidated } from '../../utils/body'
import { designTarget } from '../../utils/design-target'
import { gainUnits } from '../../utils/gain-units'
import { compute, limitCompute } from '../../utils/limits'
import { resolveController, resolveLoop } from '../../utils/loop-model'

export default defineEventHandler(async (event) => {
  await limitCompute(event)
  const body = await readValidated(event, solveBodySchema)
  const { requirements, response } = body
  return compute(event, (): SolveAnswer => ({
    ...solveDesign(resolveLoop(body.loop), resolveController(body.controller), designTarget(body), { requirements, response }),
    gainUnits: gainUnits(body.loop, body.controller),
  }))
})
