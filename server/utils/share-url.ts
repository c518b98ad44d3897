import type { H3Event } from 'h3'
import type { ShareLink } from '#shared/schemas/link'
import type { Link } from '../database/queries/links'

/** A link as its scenario's people see it. The address is the configured site's, or else the one that was asked. */
export function toShareLink(event: H3Event, link: Link): ShareLink {
  const site = useRuntimeConfig().public.siteUrl || getRequestURL(event, { xForwardedProto: String(useRuntimeConfig().trustProxy) === 'true' }).origin
  return {
    id: link.id,
    token: link.token,
    url: new URL(`/s/${link.token}`, site).href,
    permission: link.permission,
    expiresAt: link.expiresAt?.toISOString() ?? null,
    createdAt: link.createdAt.toISOString(),
    lastUsedAt: link.lastUsedAt?.toISOString() ?? null,
  }
}
