import { endAll } from '../utils/shutdown'
import { deleteExpiredSessions } from '../database/queries/sessions'

const hour = 3_600_000

// Unfinished requests get four seconds; then the database is closed in order.
process.env.NITRO_SHUTDOWN_TIMEOUT ||= '4000'

/** On SIGTERM open streams end at once, so that the server can finish its requests and close. */
export default defineNitroPlugin((nitro) => {
  const sweep = setInterval(() => deleteExpiredSessions(), hour)
  sweep.unref()
  const end = () => {
    clearInterval(sweep)
    endAll()
  }
  process.once('SIGTERM', end)
  process.once('SIGINT', end)
  nitro.hooks.hook('close', end)
})
