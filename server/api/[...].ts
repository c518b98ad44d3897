import routes from '#api-routes'
import { allowedMethods } from '../utils/allowed-methods'
import { failure, notFound } from '../utils/errors'

/** Whatever no route of this interface takes: a wrong method on a right address, or no address at all. */
export default defineEventHandler((event) => {
  const allowed = allowedMethods(routes, event.path.split('?')[0] ?? '')
  if (allowed.length === 0) throw notFound('There is no such address in this interface.')
  setResponseHeader(event, 'Allow', allowed.join(', '))
  throw failure(405, `This address takes ${allowed.join(' and ')}, not ${event.method}.`)
})
