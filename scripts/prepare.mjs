import { execFileSync } from 'node:child_process'
import { existsSync, readdirSync, readFileSync, statSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'

/** What the other scripts need before they can start: packages, a build, a browser. */

export const root = dirname(dirname(fileURLToPath(import.meta.url)))

export const builtServer = join(root, '.output', 'server', 'index.mjs')

/** Runs a command in the project's folder and shows what it prints; throws when it fails. */
export function run(command, args, options = {}) {
  execFileSync(command, args, { cwd: root, stdio: ['ignore', 'inherit', 'inherit'], ...options })
}

/** Installs the packages of the lock file where they are missing or older than it. */
export function ensurePackages() {
  const lock = join(root, 'package-lock.json')
  const installed = join(root, 'node_modules', '.package-lock.json')
  if (existsSync(installed) && versions(lock) === versions(installed)) return
  console.log('Installing the packages ...')
  run('npm', ['ci', '--no-audit', '--no-fund'])
}

/** The direct dependencies and what the lock file resolves them to; a difference means that an installation is due. */
function versions(lockFile) {
  const { dependencies, devDependencies } = JSON.parse(readFileSync(join(root, 'package.json'), 'utf8'))
  const { packages } = JSON.parse(readFileSync(lockFile, 'utf8'))
  return JSON.stringify(Object.keys({ ...dependencies, ...devDependencies }).map(name => [name, packages[`node_modules/${name}`]?.version]))
}

/** Builds the application unless the build is newer than every source. */
export function ensureBuild() {
  const stamp = join(root, '.output', 'nitro.json')
  const sources = [
    'app.vue', 'error.vue', 'nuxt.config.ts', 'tailwind.config.ts', 'package.json', 'assets', 'components', 'composables', 'layouts',
    'middleware', 'pages', 'plugins', 'public', 'server', 'shared', 'stores', 'utils',
  ]
  if (existsSync(stamp) && sources.every(source => newest(join(root, source)) < statSync(stamp).mtimeMs)) return
  console.log('Building ...')
  run(process.execPath, [join(root, 'node_modules', 'nuxt', 'bin', 'nuxt.mjs'), 'build', '--logLevel', 'silent'])
}

function newest(path) {
  if (!existsSync(path)) return 0
  const { mtimeMs } = statSync(path)
  if (!statSync(path).isDirectory()) return mtimeMs
  return Math.max(mtimeMs, ...readdirSync(path).map(name => newest(join(path, name))))
}

/** Debian's Chromium, installed where there is none and it may be. Its path is in CHROMIUM_PATH for the tests. */
export function ensureBrowser() {
  const known = [process.env.CHROMIUM_PATH, '/usr/bin/chromium', '/usr/bin/chromium-browser', '/usr/bin/google-chrome'].filter(Boolean)
  const found = known.find(path => existsSync(path))
  if (found !== undefined) return found
  console.log('Installing Chromium for the browser tests ...')
  try {
    run('apt-get', ['update', '-qq'])
    run('apt-get', ['install', '-y', '-qq', '--no-install-recommends', 'chromium'], {
      env: { ...process.env, DEBIAN_FRONTEND: 'noninteractive' },
    })
  } catch {
    throw new Error('The browser tests need Chromium: install it (on Debian: apt-get install chromium) or set CHROMIUM_PATH.')
  }
  return '/usr/bin/chromium'
}
