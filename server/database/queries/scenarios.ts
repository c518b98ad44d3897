import { and, asc, count, desc, eq, inArray, isNotNull, isNull, like, or, sql, type SQL } from 'drizzle-orm'
import { documentVersion } from '#shared/document/format'
import { readDocument } from '#shared/document/version'
import type { CreateScenarioBody, Scenario, ScenarioListQuery, ScenarioPage, ScenarioSummary, UpdateScenarioBody } from '#shared/schemas/scenario'
import { shortId } from '../../utils/ids'
import { atomically, database } from '../client'
import { comments, scenarios, users } from '../schema'

/** Whose scenarios: every query names the teams in its WHERE, so that what belongs to others is not found. */
export interface Reach {
  teamIds: string[]
}

const unresolved = sql<number>`(select count(*) from ${comments}
  where ${comments.scenarioId} = ${scenarios.id} and ${comments.parentId} is null and ${comments.resolvedAt} is null)`

const summaryColumns = {
  id: scenarios.id,
  title: scenarios.title,
  machine: scenarios.machine,
  axis: scenarios.axis,
  version: scenarios.version,
  ownerName: users.name,
  unresolvedComments: unresolved,
  createdAt: scenarios.createdAt,
  updatedAt: scenarios.updatedAt,
  deletedAt: scenarios.deletedAt,
}

type SummaryRow = Omit<ScenarioSummary, 'status' | 'createdAt' | 'updatedAt'> & { createdAt: Date, updatedAt: Date, deletedAt: Date | null }

function toSummary({ deletedAt, createdAt, updatedAt, ...row }: SummaryRow): ScenarioSummary {
  return {
    ...row, status: deletedAt === null ? 'draft' : 'deleted', createdAt: createdAt.toISOString(), updatedAt: updatedAt.toISOString(),
  }
}

const within = (reach: Reach, ...more: (SQL | undefined)[]) => and(inArray(scenarios.teamId, reach.teamIds), ...more)

/** Text that a person typed, as a LIKE pattern in which their % and _ mean themselves. */
const containing = (text: string) => `%${text.replace(/[\\%_]/g, '\\$&')}%`
const holds = (column: typeof scenarios.title | typeof scenarios.machine | typeof scenarios.axis, text: string) =>
  sql`${like(column, containing(text))} escape '\\'`

const sortColumns = {
  title: sql`${scenarios.title} collate nocase`,
  machine: sql`${scenarios.machine} collate nocase`,
  axis: sql`${scenarios.axis} collate nocase`,
  updatedAt: scenarios.updatedAt,
  createdAt: scenarios.createdAt,
}

export function listScenarios(reach: Reach, query: ScenarioListQuery): ScenarioPage {
  const where = within(
    reach,
    query.status === 'deleted' ? isNotNull(scenarios.deletedAt) : isNull(scenarios.deletedAt),
    query.machine === undefined ? undefined : eq(scenarios.machine, query.machine),
    ...query.search.split(/\s+/).filter(word => word !== '')
      .map(word => or(holds(scenarios.title, word), holds(scenarios.machine, word), holds(scenarios.axis, word))),
  )
  const column = sortColumns[query.sort.replace('-', '') as keyof typeof sortColumns]
  const rows = database().select(summaryColumns).from(scenarios).innerJoin(users, eq(users.id, scenarios.ownerId)).where(where)
    .orderBy(query.sort.startsWith('-') ? desc(column) : asc(column), asc(scenarios.id))
    .limit(query.pageSize).offset((query.page - 1) * query.pageSize).all()
  const total = database().select({ total: count() }).from(scenarios).where(where).get()?.total ?? 0
  return { scenarios: rows.map(toSummary), page: query.page, pageSize: query.pageSize, total }
}

export function scenarioById(reach: Reach, id: string): Scenario | undefined {
  const row = database()
    .select({ ...summaryColumns, document: scenarios.document, documentVersion: scenarios.documentVersion }).from(scenarios)
    .innerJoin(users, eq(users.id, scenarios.ownerId))
    .where(within(reach, eq(scenarios.id, id), isNull(scenarios.deletedAt))).get()
  if (row === undefined) return undefined
  const { document, documentVersion: savedVersion, ...summary } = row
  return { ...toSummary(summary), document: readDocument(document, savedVersion) }
}

export function createScenario(author: { teamId: string, userId: string }, body: CreateScenarioBody): Scenario {
  const now = new Date()
  const id = shortId()
  database().insert(scenarios).values({
    id, teamId: author.teamId, ownerId: author.userId, changedById: author.userId, title: body.title, machine: body.machine ?? '', axis: body.axis ?? '',
    document: body.document, documentVersion, createdAt: now, updatedAt: now,
  }).run()
  return scenarioById({ teamIds: [author.teamId] }, id)!
}

/** The changed scenario; 'changed' when somebody saved a newer version since; undefined when there is none within reach. */
export function updateScenario(reach: Reach, userId: string, id: string, body: UpdateScenarioBody): Scenario | 'changed' | undefined {
  const { version, document, ...names } = body
  return atomically((store) => {
    const { changes } = store.update(scenarios).set({
      ...names, ...(document === undefined ? {} : { document, documentVersion }), version: version + 1, updatedAt: new Date(), changedById: userId,
    }).where(within(reach, eq(scenarios.id, id), eq(scenarios.version, version), isNull(scenarios.deletedAt))).run()
    const present = scenarioById(reach, id)
    return changes === 1 || present === undefined ? present : 'changed'
  })
}

/** Deleting only marks the row, so that it can be undone. False when there is nothing to delete. */
export function deleteScenario(reach: Reach, id: string): boolean {
  return database().update(scenarios).set({ deletedAt: new Date() })
    .where(within(reach, eq(scenarios.id, id), isNull(scenarios.deletedAt))).run().changes === 1
}

export function restoreScenario(reach: Reach, id: string): boolean {
  return database().update(scenarios).set({ deletedAt: null })
    .where(within(reach, eq(scenarios.id, id), isNotNull(scenarios.deletedAt))).run().changes === 1
}
