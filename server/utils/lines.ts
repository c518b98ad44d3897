import type { H3Event } from 'h3'
import { errorBody, toFailure } from './errors'
import { atShutdown } from './shutdown'

/**
 * Answers with lines of JSON as they come (application/x-ndjson). What fails before the first line is an answer like any other; later, when the status
 * has been sent, a last line `{ "error": { "message" } }` tells. When the caller leaves, or the server stops, no further line is asked for.
 */
export async function sendLines(event: H3Event, lines: AsyncIterator<unknown>) {
  const { res } = event.node
  let gone = false
  const leave = () => { gone = true }
  res.once('close', leave)
  const forget = atShutdown(leave)
  try {
    let line = await lines.next()
    if (gone) return
    setResponseHeaders(event, { 'Content-Type': 'application/x-ndjson; charset=utf-8', 'X-Accel-Buffering': 'no' })
    for (; !line.done && !gone; line = await lines.next()) write(event, line.value)
  } catch (error) {
    if (!res.headersSent) throw error
    const { message, statusCode } = errorBody(toFailure(error))
    if (statusCode >= 500) console.error('[api]', event.method, event.path.split('?')[0], error)
    write(event, { error: { message } })
  } finally {
    res.off('close', leave)
    forget()
    await lines.return?.()
    if (res.headersSent) res.end()
  }
}

function write(event: H3Event, line: unknown) {
  if (!event.node.res.destroyed) event.node.res.write(`${JSON.stringify(line)}\n`)
}
