import { createLinkBodySchema } from '#shared/schemas/link'
import { createLink } from '../../../../database/queries/links'
import { requireScenario } from '../../../../utils/access'
import { readValidated } from '../../../../utils/body'
import { toShareLink } from '../../../../utils/share-url'

export default defineEventHandler(async (event) => {
  const { user, scenario } = await requireScenario(event)
  const body = await readValidated(event, createLinkBodySchema)
  setResponseStatus(event, 201)
  return toShareLink(event, createLink(scenario.id, user.id, body))
})
