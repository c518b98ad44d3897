import type { Browser, BrowserContextOptions } from 'playwright-core'
import { afterAll, beforeAll } from 'vitest'
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
