import type { ErrorBody, Issue } from '#shared/schemas/errors'

/** What a failed request means to the page: the sentence and the issues of docs/http-contract.md, and whether trying again can help. */
export interface ApiFailure {
  /** HTTP status; null when no answer came at all. */
  status: number | null
  message: string
  issues: Issue[]
  /** The present version, sent along with a 409. */
  current?: unknown
  /** The same request may succeed later: no answer, too many requests, or a fault of the server. */
  temporary: boolean
}

const unreachable = 'The server cannot be reached. What you typed is kept.'

/** Reads a rejected request. Anything that is no answer of the server counts as "cannot be reached". */
export function readFailure(thrown: unknown): ApiFailure {
  const status = numberAt(thrown, 'statusCode') ?? numberAt(thrown, 'status')
  if (status === null) return { status: null, message: unreachable, issues: [], temporary: true }
  const body = bodyOf(thrown)
  return {
    status,
    message: body.message ?? 'The server refused this without saying why.',
    issues: body.data?.issues ?? [],
    current: body.data?.current,
    temporary: status === 429 || status >= 500,
  }
}

/** The first message of each field, by the field's path. */
export function messagesByPath(issues: { path: string, message: string }[]): Record<string, string> {
  const messages: Record<string, string> = {}
  for (const { path, message } of issues) messages[path] ??= message
  return messages
}

function bodyOf(thrown: unknown): Partial<ErrorBody> {
  const data = valueAt(thrown, 'data')
  return typeof data === 'object' && data !== null ? data as Partial<ErrorBody> : {}
}

function numberAt(from: unknown, key: string): number | null {
  const value = valueAt(from, key)
  return typeof value === 'number' && value > 0 ? value : null
}

function valueAt(from: unknown, key: string): unknown {
  return typeof from === 'object' && from !== null ? Reflect.get(from, key) : undefined
}
