import { and, desc, eq, gt, isNull, or } from 'drizzle-orm'
import { readDocument } from '#shared/document/version'
import type { CreateLinkBody, SharedScenario } from '#shared/schemas/link'
import { linkToken, shortId } from '../../utils/ids'
import { database } from '../client'
import { links, scenarios, users } from '../schema'

export type Link = typeof links.$inferSelect

export function createLink(scenarioId: string, userId: string, body: CreateLinkBody): Link {
  return database().insert(links).values({
    id: shortId(), scenarioId, createdById: userId, token: linkToken(), permission: body.permission, createdAt: new Date(),
    expiresAt: body.expiresAt === undefined ? null : new Date(body.expiresAt),
  }).returning().get()
}

export function linksOf(scenarioId: string): Link[] {
  return database().select().from(links).where(and(eq(links.scenarioId, scenarioId), isNull(links.revokedAt)))
    .orderBy(desc(links.createdAt)).all()
}

/** False when there is no such link on this scenario. */
export function revokeLink(scenarioId: string, id: string): boolean {
  return database().update(links).set({ revokedAt: new Date() })
    .where(and(eq(links.scenarioId, scenarioId), eq(links.id, id), isNull(links.revokedAt))).run().changes === 1
}

/** The link of a token while it is neither revoked nor expired and its scenario is not deleted. */
export function linkByToken(token: string, now = new Date()): Link | undefined {
  return database().select({ link: links }).from(links).innerJoin(scenarios, eq(scenarios.id, links.scenarioId))
    .where(and(
      eq(links.token, token), isNull(links.revokedAt), isNull(scenarios.deletedAt), or(isNull(links.expiresAt), gt(links.expiresAt, now)),
    )).get()?.link
}

/** Notes that the link was opened, to the minute: a reload writes nothing. */
export function markLinkUsed({ id, lastUsedAt }: Link, now = new Date()) {
  if (lastUsedAt !== null && now.getTime() - lastUsedAt.getTime() < 60_000) return
  database().update(links).set({ lastUsedAt: now }).where(eq(links.id, id)).run()
}

/** All that a visitor may see, field by field: nothing travels because it happens to stand in the row. */
export function sharedScenario(link: Link): SharedScenario | undefined {
  const row = database().select({ scenario: scenarios, ownerName: users.name }).from(scenarios)
    .innerJoin(users, eq(users.id, scenarios.ownerId)).where(eq(scenarios.id, link.scenarioId)).get()
  if (row === undefined) return undefined
  const { scenario, ownerName } = row
  return {
    title: scenario.title,
    machine: scenario.machine,
    axis: scenario.axis,
    ownerName,
    version: scenario.version,
    updatedAt: scenario.updatedAt.toISOString(),
    permission: link.permission,
    document: readDocument(scenario.document, scenario.documentVersion),
  }
}
