import migrations from '#migrations'
import { openDatabase, type Store } from './open'

let store: Store | undefined

/** The one connection of this process, opened and migrated at the first call (the start-up plugin makes it). */
export function database(): Store {
  store ??= openDatabase(useRuntimeConfig().databasePath, migrations)
  return store
}

/** Writes the log back into the file and closes it. */
export function closeDatabase() {
  if (store === undefined) return
  store.$client.pragma('wal_checkpoint(TRUNCATE)')
  store.$client.close()
  store = undefined
}

/** All of `work` or nothing; it must be synchronous. */
export function atomically<T>(work: (store: Store) => T): T {
  return database().$client.transaction(() => work(database())).immediate()
}
