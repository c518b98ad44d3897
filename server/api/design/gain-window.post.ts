import { gainWindowSteps } from '#shared/control/gain-window'
import { placementOf } from '#shared/control/solve'
import { solveBodySchema } from '#shared/schemas/design'
import { readValidated } from '../../utils/body'
import { designTarget } from '../../utils/design-target'
import { compute, limitCompute } from '../../utils/limits'
import { resolveController, resolveLoop } from '../../utils/loop-model'
import { inStretches, resultOf } from '../../utils/stepwise'

/** Computing time after which a window that costs so much is refused. */
const mostMs = 4000

export default defineEventHandler(async (event) => {
  await limitCompute(event)
  const body = await readValidated(event, solveBodySchema)
  const steps = await compute(event, () => {
    const [model, controller] = [resolveLoop(body.loop), resolveController(body.controller)]
    const { gains } = placementOf(model, controller, designTarget(body))
    const { amplitude = 1, settlingBandPercent = 2 } = body.response ?? {}
    return gainWindowSteps(model, controller, gains, body.requirements, { amplitude, settlingBandPercent })
  })
  return resultOf(event, inStretches(event, steps, mostMs))
})
