import type { ErrorBody } from '#shared/schemas/errors'
import { RefusedError } from './newest-waits'

/** Answers with these codes say nothing about the question: the same one may succeed a moment later. */
const passing = [408, 429]

/**
 * Posts JSON and returns the JSON answer.
 * @throws RefusedError with the error body of docs/http-contract.md where the question is at fault; any other error where the server is gone, slow or broken
 */
export async function askServer<Answer>(path: string, body: unknown, signal?: AbortSignal): Promise<Answer> {
  const response = await fetch(path, { method: 'POST', headers: { 'content-type': 'application/json' }, body: JSON.stringify(body), signal })
  if (response.ok) return await response.json() as Answer
  if (response.status >= 500 || passing.includes(response.status)) throw new Error(`the server answered ${response.status}`)
  throw refusal(response.status, await response.json().catch(() => null))
}

function refusal(statusCode: number, body: Partial<ErrorBody> | null): RefusedError<ErrorBody> {
  const message = body?.message ?? `the server answered ${statusCode}`
  return new RefusedError<ErrorBody>({ statusCode, statusMessage: '', ...body, message }, message)
}
