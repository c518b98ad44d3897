import { randomBytes } from 'node:crypto'
import { mkdirSync, readFileSync, writeFileSync } from 'node:fs'
import { dirname } from 'node:path'

/** Characters that a key for sealing cookies has at least. */
export const leastSecretLength = 32

/**
 * The key kept in a file: made by whichever process comes first, readable by its owner alone, and read by all others.
 * @throws where the file holds no key: it was made, but never written to the end
 */
export function keptSecret(file: string): string {
  mkdirSync(dirname(file), { recursive: true })
  const fresh = randomBytes(32).toString('base64url')
  try {
    // Fails where the file is there already, also when another process made it just now.
    writeFileSync(file, fresh, { mode: 0o600, flag: 'wx' })
    return fresh
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code !== 'EEXIST') throw error
  }
  const kept = readFileSync(file, 'utf8').trim()
  if (kept.length >= leastSecretLength) return kept
  throw new Error(`${file} holds no key of ${leastSecretLength} characters: delete it, and a new one is made, which signs everybody out.`)
}
