import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { spawnSync } from 'node:child_process'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { ensureBrowser, ensurePackages, root } from './prepare.mjs'

/**
 * Everything that says whether the project is sound: lint, type check, build, then the tests from the smallest to the largest.
 * A step that fails does not keep the later ones from running, except that without a build there is no server to test.
 * The last line counts every test, and each of the three checks as one.
 */

const counts = { passed: 0, failed: 0 }
const reports = mkdtempSync(join(tmpdir(), 'polewright-reports-'))
const bin = name => join(root, 'node_modules', '.bin', name)

function step(title, command, args, environment = {}) {
  console.log(`\n== ${title}`)
  const started = performance.now()
  const { status } = spawnSync(command, args, { cwd: root, stdio: ['ignore', 'inherit', 'inherit'], env: { ...process.env, ...environment } })
  console.log(`== ${title}: ${status === 0 ? 'done' : 'FAILED'} in ${Math.round((performance.now() - started) / 1000)} s`)
  return status === 0
}

function check(title, command, args) {
  const passed = step(title, command, args)
  counts[passed ? 'passed' : 'failed'] += 1
  return passed
}

function tests(title, projects, environment) {
  const report = join(reports, `${projects.join('-')}.json`)
  const passed = step(title, bin('vitest'), [
    'run', ...projects.flatMap(project => ['--project', project]), '--reporter=default', '--reporter=json', `--outputFile.json=${report}`,
  ], environment)
  const { numPassedTests = 0, numFailedTests = 0, numPendingTests = 0, numTodoTests = 0 } = readReport(report)
  counts.passed += numPassedTests
  // A skipped test proves nothing, and a run that broke before its tests must not look green.
  const failed = numFailedTests + numPendingTests + numTodoTests
  counts.failed += failed === 0 && (!passed || numPassedTests === 0) ? 1 : failed
}

function readReport(file) {
  try {
    return JSON.parse(readFileSync(file, 'utf8'))
  } catch {
    return {}
  }
}

ensurePackages()
const browser = ensureBrowser()
check('lint', bin('eslint'), ['.'])
check('type check', bin('nuxt'), ['typecheck'])
tests('unit tests, properties and reference tests', ['unit', 'properties', 'reference', 'check-values'])
if (check('build', bin('nuxt'), ['build', '--logLevel', 'silent'])) {
  tests('tests of the HTTP interface', ['api'])
  tests('browser tests', ['browser'], { CHROMIUM_PATH: browser })
}
rmSync(reports, { recursive: true, force: true })
console.log(`\n${counts.passed} passed, ${counts.failed} failed`)
process.exit(counts.failed === 0 ? 0 : 1)
