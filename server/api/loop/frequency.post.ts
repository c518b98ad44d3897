import { closeLoop } from '#shared/control/closed-loop'
import { frequencyResponse } from '#shared/control/frequency/frequency-response'
import { placementOf } from '#shared/control/solve'
import { frequencyBodySchema } from '#shared/schemas/design'
import { readValidated } from '../../utils/body'
import { designTarget } from '../../utils/design-target'
import { compute, limitCompute } from '../../utils/limits'
import { resolveController, resolveLoop } from '../../utils/loop-model'

export default defineEventHandler(async (event) => {
  await limitCompute(event)
  const body = await readValidated(event, frequencyBodySchema)
  const { from, to, samples } = body
  return compute(event, () => {
    const [model, controller] = [resolveLoop(body.loop), resolveController(body.controller)]
    const { gains } = placementOf(model, controller, designTarget(body))
    return frequencyResponse(closeLoop(model, controller, gains), { from, to, samples })
  })
})
