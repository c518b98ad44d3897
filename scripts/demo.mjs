import { spawn } from 'node:child_process'
import { builtServer, ensureBuild, ensurePackages } from './prepare.mjs'
import { seed } from './seed.mjs'

/**
 * One command from a fresh clone to a bench with a demo team on it: installs, builds, migrates (the server does, before it serves),
 * seeds through the product's own interface, and goes on serving until Ctrl+C.
 */

ensurePackages()
ensureBuild()

const port = process.env.PORT ?? '3000'
const server = spawn(process.execPath, [builtServer], { stdio: ['ignore', 'pipe', 'inherit'], env: { ...process.env, PORT: port } })
for (const signal of ['SIGINT', 'SIGTERM']) process.on(signal, () => server.kill(signal))
server.on('exit', code => process.exit(code ?? 0))

const origin = await new Promise((resolve) => {
  server.stdout.on('data', (chunk) => {
    process.stdout.write(chunk)
    const address = /Listening on http:\/\/\S+?:(\d+)/.exec(String(chunk))
    if (address !== null) resolve(`http://localhost:${address[1]}`)
  })
})

const demo = await seed(origin).catch((error) => {
  // The error ends this script alone; the server would go on without anybody to stop it.
  server.kill()
  throw error
})
console.log(`
Polewright is at ${origin}
  the bench, without an account   ${origin}/
  the demo team                   ${origin}/sign-in   ${demo.email} / ${demo.password}
${demo.shareUrl === undefined ? '' : `  a shared scenario, as a guest   ${demo.shareUrl}\n`}Stop with Ctrl+C.`)
