import { failure } from '../utils/errors'
import { limit } from '../utils/limits'

const harmless = new Set(['GET', 'HEAD', 'OPTIONS'])

/**
 * Writes come from our own pages, or from scripts, which bring no cookie by accident; a browser says where a write comes from. What
 * other sites can send without being asked (forms, plain text) is refused by its type.
 */
export default defineEventHandler(async (event) => {
  const host = getRequestHeader(event, 'host')
  if (host !== undefined && !URL.canParse(`http://${host}`)) throw failure(400, 'The Host header names no host.')
  if (harmless.has(event.method)) return
  const ownSite = useRuntimeConfig().public.siteUrl
  if (isForeign(getRequestHeader(event, 'sec-fetch-site'), getRequestHeader(event, 'origin'), host, ownSite)) {
    console.warn('[refused] a write from another site')
    throw failure(403, 'This request came from another site.')
  }
  const type = getRequestHeader(event, 'content-type')?.split(';')[0]?.trim().toLowerCase()
  if (type !== undefined && type !== 'application/json') throw failure(415, 'Send the body as application/json.')
  if (event.path.startsWith('/api/scenarios') || event.path.startsWith('/api/shared')) await limit(event, 'write')
})

function isForeign(site: string | undefined, origin: string | undefined, host: string | undefined, ownSite: string): boolean {
  if (site !== undefined) return site !== 'same-origin' && site !== 'none'
  if (origin === undefined) return false
  if (!URL.canParse(origin)) return true
  const { host: from, origin: whole } = new URL(origin)
  return from !== host && (ownSite === '' || whole !== new URL(ownSite).origin)
}
