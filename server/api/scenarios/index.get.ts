import { scenarioListQuerySchema } from '#shared/schemas/scenario'
import { listScenarios } from '../../database/queries/scenarios'
import { requireUser } from '../../utils/auth'
import { queryValidated } from '../../utils/body'

export default defineEventHandler(async (event) => {
  const signedIn = await requireUser(event)
  return listScenarios(signedIn, queryValidated(event, scenarioListQuerySchema))
})
