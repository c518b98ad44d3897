import { limits } from '#shared/schemas/limits'
import { createScenario } from '../../../database/queries/scenarios'
import { requireScenario } from '../../../utils/access'

const suffix = ' (copy)'

export default defineEventHandler(async (event) => {
  const { user, homeTeamId, scenario } = await requireScenario(event)
  const title = `${scenario.title.slice(0, limits.title - suffix.length)}${suffix}`
  setResponseStatus(event, 201)
  return createScenario({ teamId: homeTeamId, userId: user.id }, { title, machine: scenario.machine, axis: scenario.axis, document: scenario.document })
})
