import type { Browser, BrowserContextOptions } from 'playwright-core'
import { afterAll, afterEach, beforeAll, beforeEach } from 'vitest'
import { BenchPage } from './bench-page'
import { openBrowser, visitor, type Visitor } from './browser'
import { startServer, type RunningServer } from './server'

/** The built product with a database of its own and a browser to look at it, for as long as the tests of a file run. */
export function stage() {
  let server: RunningServer
  let browser: Browser
  beforeAll(async () => {
    [server, browser] = await Promise.all([startServer(), openBrowser()])
  })
  afterAll(async () => {
    await browser?.close()
    await server?.stop()
  })
  return {
    /** Another person at a browser of their own. */
    visit: (options?: BrowserContextOptions): Promise<Visitor> => visitor(browser, server.origin, options),
    origin: () => server.origin,
  }
}

/** A stage on which tests begin with somebody new at the bench of `/`: all of a file, or of the `describe` in which `begin` is called. */
export function benchStage() {
  const { visit, origin } = stage()
  const at = {} as { someone: Visitor, bench: BenchPage }
  const begin = (options?: BrowserContextOptions) => {
    beforeEach(async () => {
      at.someone = await visit(options)
      at.bench = await new BenchPage(at.someone.page).open('/')
    })
    afterEach(() => at.someone.leave())
  }
  return { visit, origin, at, begin }
}
