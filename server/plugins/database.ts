import { closeDatabase, database } from '../database/client'

/** Nothing is served before the migrations ran: this plugin is synchronous and runs before the server listens. */
export default defineNitroPlugin((nitro) => {
  database()
  nitro.hooks.hook('close', () => closeDatabase())
})
