import type { ErrorBody } from '#shared/schemas/errors'
import { RefusedError } from './newest-waits'

/** Answers with these codes say nothing about the question: the same one may succeed a moment later. */
const passing = [408, 429]

/**
 * Posts JSON and returns the JSON answer.
 * @throws RefusedError with the error body of docs/http-contract.md where the question is at fault; any other error where the server is gone, slow or broken
 */
export async function askServer<Answer>(path: string, body: unknown, signal?: AbortSignal): Promise<Answer> {
  return await (await post(path, body, signal)).json() as Answer
}

/**
 * Posts JSON and returns the lines of the answer (application/x-ndjson) as they come.
 * @throws as `askServer` does
 */
export async function* askForLines<Line>(path: string, body: unknown, signal?: AbortSignal): AsyncGenerator<Line> {
  const answer = await post(path, body, signal)
  const reader = answer.body!.pipeThrough(new TextDecoderStream()).getReader()
  let rest = ''
  for (let part = await reader.read(); !part.done; part = await reader.read()) {
    const lines = (rest + part.value).split('\n')
    rest = lines.pop()!
    for (const line of lines) yield JSON.parse(line) as Line
  }
}

async function post(path: string, body: unknown, signal?: AbortSignal): Promise<Response> {
  const response = await fetch(path, { method: 'POST', headers: { 'content-type': 'application/json' }, body: JSON.stringify(body), signal })
  if (response.ok) return response
  const error = await response.json().catch(() => null) as Partial<ErrorBody> | null
  if (response.status >= 500 || passing.includes(response.status)) throw new Error(error?.message ?? `the server answered ${response.status}`)
  throw refusal(response.status, error)
}

function refusal(statusCode: number, body: Partial<ErrorBody> | null): RefusedError<ErrorBody> {
  const message = body?.message ?? `the server answered ${statusCode}`
  return new RefusedError<ErrorBody>({ statusCode, statusMessage: '', ...body, message }, message)
}
