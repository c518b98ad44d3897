import { send, setResponseHeader, setResponseStatus } from 'h3'
import { defineNitroErrorHandler } from 'nitropack/runtime'
import { errorBody, toFailure } from './utils/errors'

/** Failures under /api answer in the form of docs/http-contract.md; pages go on to Nuxt's own handler. */
export default defineNitroErrorHandler((error, event) => {
  if (!/^\/api([/?]|$)/.test(event.path) || event.handled) return
  const failed = toFailure(error.unhandled ? error.cause ?? error : error)
  const body = errorBody(failed)
  if (body.statusCode >= 500) console.error('[api]', event.method, event.path.split('?')[0], error.cause ?? error)
  setResponseHeader(event, 'Content-Type', 'application/json; charset=utf-8')
  setResponseHeader(event, 'Cache-Control', 'no-store')
  setResponseHeader(event, 'X-Content-Type-Options', 'nosniff')
  setResponseStatus(event, body.statusCode, body.statusMessage)
  return send(event, JSON.stringify(body))
})
