import { suffixedTitle } from '#shared/document/suffixed-title'
import { createScenario } from '../../../database/queries/scenarios'
import { requireScenario } from '../../../utils/access'

export default defineEventHandler(async (event) => {
  const { user, homeTeamId, scenario } = await requireScenario(event)
  setResponseStatus(event, 201)
  return createScenario({ teamId: homeTeamId, userId: user.id }, { title: suffixedTitle(scenario.title, ' (copy)'), machine: scenario.machine, axis: scenario.axis, document: scenario.document })
})
