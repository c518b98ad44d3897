import { readFileSync, statSync, writeFileSync } from 'node:fs'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { keptSecret } from '~/server/utils/kept-secret'
import { temporaryFolder } from '../../helpers/database'

describe('the kept key', () => {
  let place: ReturnType<typeof temporaryFolder>
  beforeEach(() => { place = temporaryFolder() })
  afterEach(() => place.remove())

  it('is made once, in folders made with it, for its owner alone', () => {
    const file = place.file('made/session-password')
    const secret = keptSecret(file)
    expect(secret.length).toBeGreaterThanOrEqual(32)
    expect(keptSecret(file)).toBe(secret)
    expect(readFileSync(file, 'utf8')).toBe(secret)
    expect(statSync(file).mode & 0o077).toBe(0)
  })

  it('of another process is taken over, never overwritten', () => {
    const file = place.file('session-password')
    writeFileSync(file, `${'k'.repeat(40)}\n`)
    expect(keptSecret(file)).toBe('k'.repeat(40))
  })

  it.each(['', 'short'])('that is %j is said to be none, with what to do', (text) => {
    const file = place.file('session-password')
    writeFileSync(file, text)
    expect(() => keptSecret(file)).toThrow(`${file} holds no key of 32 characters: delete it`)
    expect(readFileSync(file, 'utf8')).toBe(text)
  })
})
