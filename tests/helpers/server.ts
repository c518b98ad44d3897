import { type ChildProcess, spawn } from 'node:child_process'
import { existsSync, mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'

const builtServer = fileURLToPath(new URL('../../.output/server/index.mjs', import.meta.url))

export interface RunningServer {
  origin: string
  databasePath: string
  /** All that the process printed. */
  log: () => string
  /** Ends the process and answers with its exit code (null: by the signal). */
  stop: (signal?: NodeJS.Signals) => Promise<number | null>
}

/**
 * Starts the built server on a free port with a database of its own in a temporary folder, and waits until it serves.
 * `npm test` builds first; by hand: `npm run build`.
 */
export async function startServer(options: { environment?: Record<string, string>, entry?: string, databasePath?: string } = {}): Promise<RunningServer> {
  const entry = options.entry ?? builtServer
  if (!existsSync(entry)) throw new Error('There is no built server: run npm run build first.')
  const folder = mkdtempSync(join(tmpdir(), 'polewright-test-'))
  const databasePath = options.databasePath ?? join(folder, 'made', 'test.db')
  const child = spawn(process.execPath, [entry], {
    env: { PATH: process.env.PATH, PORT: '0', HOST: '127.0.0.1', NUXT_DATABASE_PATH: databasePath, NUXT_RATE_LIMITS: 'off', ...options.environment },
    stdio: ['ignore', 'pipe', 'pipe'],
  })
  let log = ''
  child.stdout.on('data', (chunk) => { log += chunk })
  child.stderr.on('data', (chunk) => { log += chunk })
  const origin = await listening(child, () => log)
  return {
    origin,
    databasePath,
    log: () => log,
    stop: async (signal = 'SIGTERM') => {
      const code = child.exitCode ?? await new Promise<number | null>((resolve) => {
        child.once('exit', resolve)
        child.kill(signal)
      })
      rmSync(folder, { recursive: true, force: true })
      return code
    },
  }
}

async function listening(child: ChildProcess, log: () => string): Promise<string> {
  for (let attempt = 0; attempt < 300; attempt += 1) {
    if (child.exitCode !== null) throw new Error(`The server ended before it served:\n${log()}`)
    const origin = /Listening on (http:\S+)/.exec(log())?.[1]?.replace('[::]', 'localhost')
    if (origin !== undefined && (await fetch(`${origin}/api/health`)).ok) return origin.replace(/\/$/, '')
    await new Promise(resolve => setTimeout(resolve, 50))
  }
  child.kill('SIGKILL')
  throw new Error(`The server did not serve in time:\n${log()}`)
}
