import type Database from 'better-sqlite3'

/** One migration as drizzle-kit generated it. */
export interface Migration {
  hash: string
  folderMillis: number
  sql: string[]
}

/**
 * Brings the database up to date, each migration in a transaction of its own. drizzle-kit rebuilds a table by copying and dropping it, which
 * would delete child rows by cascade; so foreign keys rest during a migration and are checked before it commits.
 */
export function migrate(sqlite: Database.Database, migrations: Migration[]): number {
  sqlite.exec('CREATE TABLE IF NOT EXISTS applied_migrations (hash TEXT PRIMARY KEY, made_at INTEGER NOT NULL, applied_at INTEGER NOT NULL)')
  const known = new Set(sqlite.prepare('SELECT hash FROM applied_migrations').pluck().all())
  const pending = migrations.filter(migration => !known.has(migration.hash)).sort((a, b) => a.folderMillis - b.folderMillis)
  if (pending.length === 0) return 0
  sqlite.pragma('foreign_keys = OFF')
  try {
    for (const migration of pending) apply(sqlite, migration)
  } finally {
    sqlite.pragma('foreign_keys = ON')
  }
  return pending.length
}

function apply(sqlite: Database.Database, migration: Migration) {
  sqlite.transaction(() => {
    for (const statement of migration.sql) sqlite.exec(statement)
    const broken = sqlite.pragma('foreign_key_check') as unknown[]
    if (broken.length > 0) throw new Error(`A migration would leave ${broken.length} rows without their parent; nothing was changed.`)
    sqlite.prepare('INSERT INTO applied_migrations VALUES (?, ?, ?)').run(migration.hash, migration.folderMillis, Date.now())
  }).immediate()
}
