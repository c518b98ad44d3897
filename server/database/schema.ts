import { sql } from 'drizzle-orm'
import { check, index, integer, primaryKey, sqliteTable, text, uniqueIndex } from 'drizzle-orm/sqlite-core'
import type { ScenarioDocument } from '#shared/schemas/document'
import type { Anchor } from '#shared/schemas/comment'
import type { DesignPointInput } from '#shared/schemas/design'
import type { LinkPermission } from '#shared/schemas/link'

/** Instants are milliseconds since 1970 in UTC. */
const instant = (name: string) => integer(name, { mode: 'timestamp_ms' })
const createdAt = () => instant('created_at').notNull()

export const users = sqliteTable('users', {
  id: text('id').primaryKey(),
  name: text('name').notNull(),
  email: text('email').notNull(),
  passwordHash: text('password_hash').notNull(),
  disabledAt: instant('disabled_at'),
  createdAt: createdAt(),
}, table => [uniqueIndex('users_email').on(table.email)])

/** The cookie carries a random id; only its hash is kept here, so that a copy of the database signs nobody in. */
export const sessions = sqliteTable('sessions', {
  idHash: text('id_hash').primaryKey(),
  userId: text('user_id').notNull().references(() => users.id, { onDelete: 'cascade' }),
  createdAt: createdAt(),
  lastSeenAt: instant('last_seen_at').notNull(),
  expiresAt: instant('expires_at').notNull(),
}, table => [index('sessions_user').on(table.userId)])

export const teams = sqliteTable('teams', {
  id: text('id').primaryKey(),
  name: text('name').notNull(),
  createdAt: createdAt(),
})

export type Role = 'owner' | 'engineer' | 'reviewer' | 'technician'

/** A person may hold several roles in a team: one row for each. */
export const memberships = sqliteTable('memberships', {
  teamId: text('team_id').notNull().references(() => teams.id, { onDelete: 'cascade' }),
  userId: text('user_id').notNull().references(() => users.id, { onDelete: 'cascade' }),
  role: text('role').$type<Role>().notNull(),
  createdAt: createdAt(),
}, table => [
  primaryKey({ columns: [table.teamId, table.userId, table.role] }),
  index('memberships_user').on(table.userId),
])

export const scenarios = sqliteTable('scenarios', {
  id: text('id').primaryKey(),
  teamId: text('team_id').notNull().references(() => teams.id, { onDelete: 'cascade' }),
  ownerId: text('owner_id').notNull().references(() => users.id),
  title: text('title').notNull(),
  machine: text('machine').notNull().default(''),
  axis: text('axis').notNull().default(''),
  document: text('document', { mode: 'json' }).$type<ScenarioDocument>().notNull(),
  documentVersion: integer('document_version').notNull(),
  version: integer('version').notNull().default(1),
  changedById: text('changed_by_id').notNull().references(() => users.id),
  createdAt: createdAt(),
  updatedAt: instant('updated_at').notNull(),
  deletedAt: instant('deleted_at'),
}, table => [
  index('scenarios_team_updated').on(table.teamId, table.updatedAt),
  check('scenarios_version', sql`${table.version} >= 1`),
])

export const links = sqliteTable('links', {
  id: text('id').primaryKey(),
  scenarioId: text('scenario_id').notNull().references(() => scenarios.id, { onDelete: 'cascade' }),
  createdById: text('created_by_id').notNull().references(() => users.id),
  token: text('token').notNull(),
  permission: text('permission').$type<LinkPermission>().notNull(),
  createdAt: createdAt(),
  expiresAt: instant('expires_at'),
  revokedAt: instant('revoked_at'),
  lastUsedAt: instant('last_used_at'),
}, table => [uniqueIndex('links_token').on(table.token), index('links_scenario').on(table.scenarioId)])

/** A comment has either a signed-in author or the name that a guest gave; a guest's comment remembers the link it came by. */
export const comments = sqliteTable('comments', {
  id: text('id').primaryKey(),
  scenarioId: text('scenario_id').notNull().references(() => scenarios.id, { onDelete: 'cascade' }),
  parentId: text('parent_id'),
  authorId: text('author_id').references(() => users.id),
  guestName: text('guest_name'),
  linkId: text('link_id').references(() => links.id),
  body: text('body').notNull(),
  anchor: text('anchor', { mode: 'json' }).$type<Anchor>(),
  designPoint: text('design_point', { mode: 'json' }).$type<DesignPointInput>(),
  scenarioVersion: integer('scenario_version').notNull(),
  createdAt: createdAt(),
  resolvedAt: instant('resolved_at'),
}, table => [
  index('comments_scenario').on(table.scenarioId, table.createdAt),
  check('comments_author', sql`(${table.authorId} is null) <> (${table.guestName} is null)`),
])
