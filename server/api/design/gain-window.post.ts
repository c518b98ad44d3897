import { NoAnswerError } from '#shared/control/errors'
import { limitCompute } from '../../utils/limits'

export default defineEventHandler(async (event) => {
  await limitCompute(event)
  throw new NoAnswerError('The gain window is not available yet.')
})
