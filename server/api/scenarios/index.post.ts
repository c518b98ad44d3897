import { createScenarioBodySchema } from '#shared/schemas/scenario'
import { createScenario } from '../../database/queries/scenarios'
import { requireUser } from '../../utils/auth'
import { readValidated } from '../../utils/body'

export default defineEventHandler(async (event) => {
  const { user, homeTeamId } = await requireUser(event)
  const body = await readValidated(event, createScenarioBodySchema)
  setResponseStatus(event, 201)
  return createScenario({ teamId: homeTeamId, userId: user.id }, body)
})
