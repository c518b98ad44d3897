import { dirname, join, resolve } from 'node:path'
import { keptSecret, leastSecretLength } from '../utils/kept-secret'

/**
 * The key that seals cookies. Set NUXT_SESSION_PASSWORD when several processes share it; without it one is made once and kept beside the
 * database, readable by its owner alone. Over https the cookie is Secure and bound to the host by its name.
 */
export default defineNitroPlugin(() => {
  const config = useRuntimeConfig()
  process.env.NUXT_SESSION_PASSWORD ||= keptSecret(join(dirname(resolve(config.databasePath)), 'session-password'))
  if (process.env.NUXT_SESSION_PASSWORD.length < leastSecretLength) throw new Error(`NUXT_SESSION_PASSWORD must have ${leastSecretLength} characters or more.`)
  if (config.public.siteUrl.startsWith('https://')) {
    process.env.NUXT_SESSION_NAME = '__Host-polewright'
    process.env.NUXT_SESSION_COOKIE_SECURE = 'true'
  }
})
