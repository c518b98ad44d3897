import { failure } from '../utils/errors'

const harmless = new Set(['GET', 'HEAD', 'OPTIONS'])

/** A browser says where a write comes from; only our own pages may write. Scripts send neither header and bring no cookie by accident. */
export default defineEventHandler((event) => {
  if (harmless.has(event.method)) return
  const site = getRequestHeader(event, 'sec-fetch-site')
  const origin = getRequestHeader(event, 'origin')
  const ownSite = useRuntimeConfig(event).public.siteUrl
  const foreign = site !== undefined
    ? site !== 'same-origin' && site !== 'none'
    : origin !== undefined && !isOwn(origin, getRequestHeader(event, 'host'), ownSite)
  if (foreign) throw failure(403, 'This request came from another site.')
})

function isOwn(origin: string, host: string | undefined, ownSite: string): boolean {
  if (!URL.canParse(origin)) return false
  const url = new URL(origin)
  return url.host === host || (ownSite !== '' && url.origin === new URL(ownSite).origin)
}
