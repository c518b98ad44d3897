import type { H3Event } from 'h3'
import type { z } from 'zod'
import { limits } from '#shared/schemas/limits'
import { badRequest, failure } from './errors'
import { issuesOf } from './issues'

/** The JSON body of a request, read up to the size cap and held against its schema; every fault is listed. */
export async function readValidated<S extends z.ZodType>(event: H3Event, schema: S): Promise<z.output<S>> {
  const type = getRequestHeader(event, 'content-type')?.split(';')[0]?.trim().toLowerCase()
  if (type !== 'application/json') throw failure(415, 'Send the body as application/json.')
  return validate(parseJson(await readCapped(event, limits.bodyBytes)), schema)
}

/** The query string, held against its schema. */
export function queryValidated<S extends z.ZodType>(event: H3Event, schema: S): z.output<S> {
  return validate(getQuery(event), schema)
}

function validate<S extends z.ZodType>(input: unknown, schema: S): z.output<S> {
  const result = schema.safeParse(input, { reportInput: true })
  if (!result.success) throw badRequest(issuesOf(result.error))
  return result.data
}

/** A body that trickles in for longer than this holds a connection for nothing. */
const mostSeconds = 20

/**
 * The body as text. Declared or streamed, no more than `most` bytes are ever kept; what comes after them is read and dropped, so that
 * the answer still reaches whoever sends it.
 */
async function readCapped(event: H3Event, most: number): Promise<string> {
  const tooLarge = () => failure(413, `The body is larger than ${Math.floor(most / 1024)} KiB.`)
  if (Number(getRequestHeader(event, 'content-length') ?? 0) > most) throw tooLarge()
  const chunks: Buffer[] = []
  let size = 0
  const request = event.node.req
  const late = setTimeout(() => request.destroy(), mostSeconds * 1000)
  request.once('close', () => clearTimeout(late))
  for await (const chunk of request.iterator({ destroyOnReturn: false }) as AsyncIterable<Buffer>) {
    size += chunk.length
    if (size > most) {
      request.resume()
      throw tooLarge()
    }
    chunks.push(chunk)
  }
  clearTimeout(late)
  return Buffer.concat(chunks).toString('utf8')
}

function parseJson(text: string): unknown {
  if (text.trim() === '') throw badRequest([{ path: '', message: 'The body is empty; a JSON object is needed.' }])
  try {
    return JSON.parse(text, (key, value) => {
      if (key === '__proto__') throw new SyntaxError('__proto__ is no field')
      return value
    })
  } catch (error) {
    throw badRequest([{ path: '', message: `The body is not JSON: ${(error as Error).message}.` }])
  }
}
