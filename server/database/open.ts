import { mkdirSync } from 'node:fs'
import { dirname, resolve } from 'node:path'
import Database from 'better-sqlite3'
import { drizzle } from 'drizzle-orm/better-sqlite3'
import { migrate, type Migration } from './migrate'
import * as schema from './schema'

export type Store = ReturnType<typeof openDatabase>

/** Opens the file (making its folder), sets the pragmas, migrates. An acknowledged save survives a power cut: WAL with synchronous FULL. */
export function openDatabase(path: string, migrations: Migration[]) {
  const file = path === ':memory:' ? path : resolve(path)
  if (file !== ':memory:') mkdirSync(dirname(file), { recursive: true })
  const sqlite = new Database(file)
  sqlite.pragma('busy_timeout = 5000')
  sqlite.pragma('journal_mode = WAL')
  sqlite.pragma('synchronous = FULL')
  sqlite.pragma('foreign_keys = ON')
  migrate(sqlite, migrations)
  return drizzle({ client: sqlite, schema })
}
