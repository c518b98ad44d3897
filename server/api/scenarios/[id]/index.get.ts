import { requireScenario } from '../../../utils/access'

export default defineEventHandler(async event => (await requireScenario(event)).scenario)
