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
  refuseNewer(sqlite, migrations)
  sqlite.pragma('foreign_keys = OFF')
  try {
    return [...migrations].sort((a, b) => a.folderMillis - b.folderMillis).filter(migration => apply(sqlite, migration)).length
  } finally {
    sqlite.pragma('foreign_keys = ON')
  }
}

/** An older program would misread tables that a newer one changed. */
function refuseNewer(sqlite: Database.Database, migrations: Migration[]) {
  const known = new Set(migrations.map(migration => migration.hash))
  const applied = sqlite.prepare<[], string>('SELECT hash FROM applied_migrations').pluck().all()
  if (applied.some(hash => !known.has(hash))) throw new Error('This database was made by a newer version of the product; nothing was changed.')
}

/** False when it was applied before, perhaps a moment ago by another process: hence the question inside the transaction. */
function apply(sqlite: Database.Database, migration: Migration): boolean {
  return sqlite.transaction(() => {
    if (sqlite.prepare('SELECT 1 FROM applied_migrations WHERE hash = ?').get(migration.hash) !== undefined) return false
    for (const statement of migration.sql) sqlite.exec(statement)
    const broken = sqlite.pragma('foreign_key_check') as unknown[]
    if (broken.length > 0) throw new Error(`A migration would leave ${broken.length} rows without their parent; nothing was changed.`)
    sqlite.prepare('INSERT INTO applied_migrations VALUES (?, ?, ?)').run(migration.hash, migration.folderMillis, Date.now())
    return true
  }).immediate()
}
