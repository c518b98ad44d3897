import { createError, isError, type H3Error } from 'h3'
import { InvalidInputError, NoAnswerError } from '#shared/control/errors'
import type { ErrorBody, Issue } from '#shared/schemas/errors'

const reasons: Record<number, string> = {
  400: 'Bad Request', 401: 'Unauthorized', 403: 'Forbidden', 404: 'Not Found', 405: 'Method Not Allowed', 409: 'Conflict',
  413: 'Content Too Large', 415: 'Unsupported Media Type', 422: 'Unprocessable Content', 429: 'Too Many Requests', 500: 'Internal Server Error',
}

/** An HTTP failure as docs/http-contract.md has it: a status, one plain sentence, and what the client needs to go on. */
export function failure(statusCode: number, message: string, data?: ErrorBody['data']): H3Error {
  return createError({ statusCode, statusMessage: reasons[statusCode], message, data })
}

export const notFound = (what = 'There is nothing at this address.') => failure(404, what)

export function badRequest(issues: Issue[]): H3Error {
  const named = issues.filter(issue => issue.path !== '')
  const first = named[0] ?? issues[0]
  const sentence = first === undefined
    ? 'The request is malformed.'
    : first.path === '' ? first.message : `${first.path}: ${first.message}`
  return failure(400, sentence, { issues })
}

/** Whatever was thrown, as the failure that the client may see. Unknown faults become a bare 500; their cause stays in the log. */
export function toFailure(thrown: unknown): H3Error {
  if (isError(thrown)) {
    if (thrown.cause instanceof InvalidInputError || thrown.cause instanceof NoAnswerError) return toFailure(thrown.cause)
    return thrown
  }
  if (thrown instanceof InvalidInputError) {
    const { path, message, position } = thrown
    return badRequest([position === undefined ? { path, message } : { path, message, position }])
  }
  if (thrown instanceof NoAnswerError) {
    const issues = thrown.path === undefined ? [] : [{ path: thrown.path, message: thrown.message }]
    return failure(422, thrown.message, { issues })
  }
  return failure(500, 'Something went wrong on the server; nothing was changed.')
}

/** The answer's body: never a stack, never a cause. */
export function errorBody(error: H3Error): ErrorBody {
  const unforeseen = error.unhandled || error.fatal
  const statusCode = unforeseen ? 500 : error.statusCode
  const body: ErrorBody = {
    statusCode,
    statusMessage: reasons[statusCode] ?? 'Error',
    message: unforeseen ? 'Something went wrong on the server; nothing was changed.' : error.message,
  }
  if (!unforeseen && error.data !== undefined) body.data = error.data as ErrorBody['data']
  return body
}
