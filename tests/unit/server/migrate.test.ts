import Database from 'better-sqlite3'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { migrate, type Migration } from '../../../server/database/migrate'
import { openDatabase } from '../../../server/database/open'
import { migrations, temporaryFolder } from '../../helpers/database'

let place: ReturnType<typeof temporaryFolder>

beforeEach(() => { place = temporaryFolder() })
afterEach(() => place.remove())

const step = (hash: string, folderMillis: number, ...sql: string[]): Migration => ({ hash, folderMillis, sql })
const first = step('first', 1,
  'CREATE TABLE axis (id INTEGER PRIMARY KEY, name TEXT)',
  'CREATE TABLE reading (id INTEGER PRIMARY KEY, axis_id INTEGER NOT NULL REFERENCES axis(id) ON DELETE CASCADE)')
/** How drizzle-kit changes a column: copy the table, drop it, rename the copy. */
const rebuild = step('rebuild', 2,
  'CREATE TABLE __new_axis (id INTEGER PRIMARY KEY, name TEXT NOT NULL)',
  'INSERT INTO __new_axis SELECT id, name FROM axis',
  'DROP TABLE axis',
  'ALTER TABLE __new_axis RENAME TO axis')

function populated() {
  const sqlite = new Database(place.file('axes.db'))
  sqlite.pragma('foreign_keys = ON')
  migrate(sqlite, [first])
  sqlite.exec(`INSERT INTO axis VALUES (1, 'slew'); INSERT INTO reading VALUES (1, 1), (2, 1)`)
  return sqlite
}

const count = (sqlite: Database.Database, table: string) => sqlite.prepare(`SELECT count(*) FROM ${table}`).pluck().get()

describe('migrating', () => {
  it('applies each migration once, in the order in which they were made', () => {
    const sqlite = new Database(':memory:')
    expect(migrate(sqlite, [rebuild, first])).toBe(2)
    expect(migrate(sqlite, [rebuild, first])).toBe(0)
    sqlite.close()
  })

  it('rebuilds a parent table without deleting its children, and guards them afterwards', () => {
    const sqlite = populated()
    migrate(sqlite, [first, rebuild])
    expect([count(sqlite, 'axis'), count(sqlite, 'reading')]).toEqual([1, 2])
    expect(sqlite.pragma('foreign_keys', { simple: true })).toBe(1)
    sqlite.exec('DELETE FROM axis')
    expect(count(sqlite, 'reading')).toBe(0)
    sqlite.close()
  })

  it('takes a migration back that would leave children without their parent', () => {
    const sqlite = populated()
    expect(() => migrate(sqlite, [first, step('careless', 2, 'DELETE FROM axis')])).toThrow('2 rows without their parent')
    expect([count(sqlite, 'axis'), count(sqlite, 'reading')]).toEqual([1, 2])
    sqlite.close()
  })

  it('takes the whole of a migration back when a statement of it fails', () => {
    const sqlite = populated()
    expect(() => migrate(sqlite, [first, step('broken', 2, 'DELETE FROM reading', 'DROP TABLE nothing')])).toThrow('nothing')
    expect(count(sqlite, 'reading')).toBe(2)
    expect(sqlite.pragma('foreign_keys', { simple: true })).toBe(1)
    sqlite.close()
  })

  it('refuses a database that a newer version changed', () => {
    const sqlite = populated()
    migrate(sqlite, [first, rebuild])
    expect(() => migrate(sqlite, [first])).toThrow('newer version')
    sqlite.close()
  })
})

describe('the database of the product', () => {
  it('is made with its folders, in WAL mode, synchronous, guarding foreign keys', () => {
    const store = openDatabase(place.file('a/b/polewright.db'), migrations)
    const pragma = (name: string) => store.$client.pragma(name, { simple: true })
    expect([pragma('journal_mode'), pragma('synchronous'), pragma('foreign_keys'), pragma('busy_timeout')]).toEqual(['wal', 2, 1, 5000])
    expect(store.$client.pragma('integrity_check', { simple: true })).toBe('ok')
    store.$client.close()
  })

  it('has the tables that the schema describes: nothing is left to generate', async () => {
    const { generateSQLiteDrizzleJson, generateSQLiteMigration } = await import('drizzle-kit/api')
    const schema = await import('../../../server/database/schema')
    const { default: snapshot } = await import('../../../server/database/migrations/meta/0000_snapshot.json')
    const present = await generateSQLiteDrizzleJson(schema)
    expect(await generateSQLiteMigration(snapshot as unknown as typeof present, present)).toEqual([])
  })

  it('refuses a comment of nobody and of two people at once', () => {
    const { $client: sqlite } = openDatabase(':memory:', migrations)
    sqlite.exec(`INSERT INTO users VALUES ('u', 'Runa', 'r@example.org', 'x', NULL, 0); INSERT INTO teams VALUES ('t', 'Team', 0);
      INSERT INTO scenarios VALUES ('s', 't', 'u', 'Title', '', '', '{}', 1, 1, 'u', 0, 0, NULL)`)
    const add = (author: string, guest: string) =>
      sqlite.exec(`INSERT INTO comments VALUES (hex(randomblob(4)), 's', NULL, ${author}, ${guest}, NULL, 'text', NULL, NULL, 1, 0, NULL)`)
    expect(() => add('NULL', 'NULL')).toThrow('comments_author')
    expect(() => add(`'u'`, `'Pell'`)).toThrow('comments_author')
    add(`'u'`, 'NULL')
    add('NULL', `'Pell'`)
    expect(count(sqlite, 'comments')).toBe(2)
    sqlite.close()
  })
})
