import { restoreScenario, scenarioById } from '../../../database/queries/scenarios'
import { requireUser } from '../../../utils/auth'
import { notFound } from '../../../utils/errors'

/** Undoes a deletion. */
export default defineEventHandler(async (event) => {
  const { teamIds } = await requireUser(event)
  const id = getRouterParam(event, 'id') ?? ''
  if (!restoreScenario({ teamIds }, id)) throw notFound('There is no deleted scenario of yours at this address.')
  return scenarioById({ teamIds }, id)
})
