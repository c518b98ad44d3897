import { gzipSync } from 'node:zlib'
import { chromium } from 'playwright-core'
import { spread } from './table.mjs'

const moves = 200
const launchArguments = ['--no-sandbox', '--disable-gpu', '--disable-background-networking', '--disable-component-update', '--disable-sync', '--no-first-run']

/** In the real page: how long after a pointer move the new gain is painted, and how many bytes of script `/` loads. */
export async function benchBrowser(origin, executablePath) {
  const browser = await chromium.launch({ executablePath, args: launchArguments })
  try {
    const page = await browser.newPage({ viewport: { width: 1440, height: 900 } })
    const scripts = []
    page.on('response', response => response.request().resourceType() === 'script' && scripts.push(response))
    await page.goto(origin)
    await page.waitForSelector('[data-test="plane"][data-point-x]')
    await page.waitForFunction(() => /\d/.test(document.querySelector('[data-test="gain"]')?.textContent ?? ''))
    await page.waitForLoadState('networkidle')
    const javascript = await measureScripts(scripts)
    return { drag: [await measureDrag(page)], javascript }
  } finally {
    await browser.close()
  }
}

async function measureScripts(scripts) {
  const bodies = await Promise.all(scripts.map(async script => ({ url: script.url(), text: await script.body() })))
  const total = bodies.reduce((sum, { text }) => sum + gzipSync(text, { level: 9 }).length, 0)
  // Names that stand in the formula parser's library and nowhere else.
  const withParser = bodies.filter(({ text }) => /AccessorNode|FunctionAssignmentNode/.test(String(text))).length
  return [{ 'files': bodies.length, 'plain': bodies.reduce((sum, { text }) => sum + text.length, 0), 'gzip': total, 'files with mathjs': withParser }]
}

/**
 * Moves the pointer by real input events along the ray and back. The clock starts at the event's own time stamp and stops in the frame after
 * the one in which the text of the gain changed, which is when it has been painted.
 */
async function measureDrag(page) {
  const plane = page.locator('[data-test="plane"]')
  const box = await plane.boundingBox()
  const start = await plane.evaluate(element => ({ x: Number(element.dataset.pointX), y: Number(element.dataset.pointY) }))
  await page.evaluate(() => {
    const readout = document.querySelector('[data-test="gain"]')
    window.dragTimes = []
    window.moveStarted = null
    window.addEventListener('pointermove', (event) => { window.moveStarted ??= event.timeStamp }, { capture: true })
    new MutationObserver(() => {
      const started = window.moveStarted
      if (started === null) return
      window.moveStarted = null
      requestAnimationFrame(() => setTimeout(() => window.dragTimes.push(performance.now() - started)))
    }).observe(readout, { childList: true, characterData: true, subtree: true })
  })
  await page.mouse.move(box.x + start.x, box.y + start.y)
  await page.mouse.down()
  for (let n = 1; n <= moves; n += 1) {
    const reach = 40 * Math.sin(n / 12)
    await page.mouse.move(box.x + start.x - reach * 0.6, box.y + start.y - reach * 0.8)
    await page.waitForTimeout(24)
  }
  await page.mouse.up()
  const times = await page.evaluate(() => window.dragTimes)
  return { moves, 'readouts painted': times.length, ...spread(times) }
}
