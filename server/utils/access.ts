import type { H3Event } from 'h3'
import type { Scenario } from '#shared/schemas/scenario'
import { linkByToken, type Link } from '../database/queries/links'
import { scenarioById } from '../database/queries/scenarios'
import { requireUser } from './auth'
import { notFound } from './errors'

type SignedIn = Awaited<ReturnType<typeof requireUser>>

/** Guard: the scenario of the address, within the teams of the signed-in person. What belongs to others is not found. */
export async function requireScenario(event: H3Event): Promise<SignedIn & { scenario: Scenario }> {
  const signedIn = await requireUser(event)
  const scenario = scenarioById(signedIn, getRouterParam(event, 'id') ?? '')
  if (scenario === undefined) throw notFound('There is no such scenario, or it is not yours.')
  return { ...signedIn, scenario }
}

/** Guard: the live link of the address. A revoked or expired one looks like one that never was. */
export function requireLink(event: H3Event): Link {
  const link = linkByToken(getRouterParam(event, 'token') ?? '')
  if (link === undefined) throw notFound('This link does not work (any more). Ask whoever sent it for a new one.')
  return link
}
