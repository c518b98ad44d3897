import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { readMigrationFiles } from 'drizzle-orm/migrator'

/** The migrations as they stand in the source tree. */
export const migrations = readMigrationFiles({ migrationsFolder: fileURLToPath(new URL('../../server/database/migrations', import.meta.url)) })

/** A folder for one test, and its removal. */
export function temporaryFolder() {
  const folder = mkdtempSync(join(tmpdir(), 'polewright-test-'))
  return { folder, file: (name: string) => join(folder, name), remove: () => rmSync(folder, { recursive: true, force: true }) }
}
