import { spawn } from 'node:child_process'
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { benchBrowser } from './bench/browser.mjs'
import { benchEngine } from './bench/engine.mjs'
import { benchHttp } from './bench/http.mjs'
import { printTable } from './bench/table.mjs'
import { builtServer, ensureBrowser, ensureBuild, ensurePackages } from './prepare.mjs'

/** How fast the product is on this machine, as tables. It judges nothing: timing has no place in a pass or fail. */

ensurePackages()
ensureBuild()

console.log(`Node ${process.version} on ${process.platform} ${process.arch}\n`)
printTable('Engine, in process (ms)', await benchEngine())

const folder = mkdtempSync(join(tmpdir(), 'polewright-bench-'))
const server = spawn(process.execPath, [builtServer], {
  stdio: ['ignore', 'pipe', 'inherit'],
  env: { ...process.env, PORT: '0', HOST: '127.0.0.1', NUXT_DATABASE_PATH: join(folder, 'bench.db'), NUXT_RATE_LIMITS: 'off' },
})
try {
  const origin = await new Promise((resolve, reject) => {
    server.stdout.on('data', (chunk) => {
      const address = /Listening on (http:\S+)/.exec(String(chunk))
      if (address !== null) resolve(address[1].replace(/\/$/, ''))
    })
    server.once('exit', () => reject(new Error('The server ended before it served.')))
  })
  printTable('POST /api/design/solve over keep-alive HTTP, order 3 and 6', await benchHttp(origin))
  const { drag, javascript } = await benchBrowser(origin, ensureBrowser())
  printTable('Pointer move to painted readout in Chromium (ms)', drag)
  printTable('JavaScript of / (bytes)', javascript)
} finally {
  server.kill()
  rmSync(folder, { recursive: true, force: true })
}
