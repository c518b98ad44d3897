import { chromium, type Browser, type BrowserContext, type BrowserContextOptions, type Page } from 'playwright-core'
import { expect } from 'vitest'

/** Debian's browser, kept from calling home. */
export function openBrowser(): Promise<Browser> {
  return chromium.launch({
    executablePath: process.env.CHROMIUM_PATH ?? '/usr/bin/chromium',
    args: ['--no-sandbox', '--disable-gpu', '--disable-background-networking', '--disable-component-update', '--disable-sync', '--no-first-run'],
  })
}

export const desktop = { viewport: { width: 1440, height: 900 } } as const
export const phone = { viewport: { width: 390, height: 844 }, hasTouch: true, isMobile: true, deviceScaleFactor: 2 } as const

/** A person at a browser of their own: one context, one page, and a watch over everything that should not happen on it. */
export interface Visitor {
  page: Page
  context: BrowserContext
  /** A failed request that a test provokes on purpose is announced before. */
  expectFailure: (status: number, path: RegExp) => void
  /** Everything that went wrong on the page so far: console errors and warnings, failed and foreign requests, exceptions. */
  faults: () => string[]
  leave: () => Promise<void>
}

export async function visitor(browser: Browser, origin: string, options: BrowserContextOptions = desktop): Promise<Visitor> {
  const context = await browser.newContext({ baseURL: origin, reducedMotion: 'reduce', ...options })
  const page = await context.newPage()
  page.setDefaultTimeout(15_000)
  const found: string[] = []
  const allowed: { status: number, path: RegExp }[] = []
  const isAllowed = (status: number, url: string) => allowed.some(one => one.status === status && one.path.test(url))

  page.on('console', (message) => {
    if (!['error', 'warning'].includes(message.type())) return
    // A request without any answer counts as status 0.
    const status = message.text().includes('net::') ? 0 : Number(/status of (\d+)/.exec(message.text())?.[1])
    if (!isAllowed(status, message.location().url)) found.push(`console ${message.type()}: ${message.text()} (${message.location().url})`)
  })
  page.on('pageerror', error => found.push(`exception: ${error.message}`))
  page.on('requestfailed', (request) => {
    const reason = request.failure()?.errorText ?? ''
    // What a page gave up itself on leaving (an event stream, a superseded question) is no failure.
    if (reason !== 'net::ERR_ABORTED' && !isAllowed(0, request.url())) found.push(`failed request: ${request.url()} ${reason}`)
  })
  page.on('request', (request) => {
    if (!request.url().startsWith(origin) && !/^(data|blob):/.test(request.url())) found.push(`foreign request: ${request.url()}`)
  })
  return {
    page,
    context,
    expectFailure: (status, path) => allowed.push({ status, path }),
    faults: () => found,
    leave: async () => {
      await context.close()
      expect(found).toEqual([])
    },
  }
}

/** Waits until a figure on the page meets the check; figures are read at full precision, not as they are rounded for show. */
export async function waitForFigure(page: Page, name: string, check: (value: number) => void, timeout = 10_000): Promise<number> {
  let value = Number.NaN
  await expect.poll(async () => {
    value = await figure(page, name)
    try {
      check(value)
      return 'as expected'
    } catch (error) {
      return `${name} = ${value}: ${(error as Error).message}`
    }
  }, { timeout, interval: 50 }).toBe('as expected')
  return value
}

/** A figure of the bench by its name in `data-test`; NaN while there is none. */
export async function figure(page: Page, name: string): Promise<number> {
  const text = await page.locator(`[data-test="${name}"]`).first().getAttribute('data-value')
  return text === null || text === '' ? Number.NaN : Number(text)
}

/** What a reader sees, spaces and the true minus sign made plain. */
export async function shown(page: Page, name: string): Promise<string> {
  const text = await page.locator(`[data-test="${name}"]`).first().innerText()
  return text.replace(/[\u202F\u00A0]/g, ' ').replace(/\u2212/g, '-').trim()
}
