import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs'
import { randomBytes } from 'node:crypto'
import { dirname, join, resolve } from 'node:path'

/**
 * The key that seals cookies. Set NUXT_SESSION_PASSWORD when several processes share it; without it one is made once and kept beside the
 * database, readable by its owner alone. Over https the cookie is Secure and bound to the host by its name.
 */
export default defineNitroPlugin(() => {
  const config = useRuntimeConfig()
  process.env.NUXT_SESSION_PASSWORD ||= keptSecret(join(dirname(resolve(config.databasePath)), 'session-password'))
  if (process.env.NUXT_SESSION_PASSWORD.length < 32) throw new Error('NUXT_SESSION_PASSWORD must have 32 characters or more.')
  if (config.public.siteUrl.startsWith('https://')) {
    process.env.NUXT_SESSION_NAME = '__Host-polewright'
    process.env.NUXT_SESSION_COOKIE_SECURE = 'true'
  }
})

function keptSecret(file: string): string {
  if (existsSync(file)) return readFileSync(file, 'utf8').trim()
  const secret = randomBytes(32).toString('base64url')
  mkdirSync(dirname(file), { recursive: true })
  writeFileSync(file, secret, { mode: 0o600 })
  return secret
}
