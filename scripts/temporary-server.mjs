import { spawn } from 'node:child_process'
import { once } from 'node:events'
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { builtServer } from './prepare.mjs'

/**
 * Serves the built product from a database of its own, at a free port, for as long as `use` runs.
 * @param {(origin: string) => Promise<void>} use
 */
export async function withTemporaryServer(use) {
  const folder = mkdtempSync(join(tmpdir(), 'polewright-'))
  const server = spawn(process.execPath, [builtServer], {
    stdio: ['ignore', 'pipe', 'inherit'],
    env: { ...process.env, PORT: '0', HOST: '127.0.0.1', NUXT_DATABASE_PATH: join(folder, 'temporary.db'), NUXT_RATE_LIMITS: 'off' },
  })
  try {
    const origin = await new Promise((resolve, reject) => {
      server.stdout.on('data', (chunk) => {
        const address = /Listening on (http:\S+)/.exec(String(chunk))
        if (address !== null) resolve(address[1].replace(/\/$/, ''))
      })
      server.once('exit', () => reject(new Error('The server ended before it served.')))
    })
    await use(origin)
  } finally {
    if (server.exitCode === null && server.kill()) await once(server, 'exit')
    rmSync(folder, { recursive: true, force: true })
  }
}
