import { join } from 'node:path'
import { chromium } from 'playwright-core'
import { ensureBrowser, ensureBuild, root } from './prepare.mjs'
import { seed } from './seed.mjs'
import { withTemporaryServer } from './temporary-server.mjs'

/** Takes the picture of the bench that the README shows, from the built product with the demo team's shared scenario. */

ensureBuild()
const file = join(root, 'docs', 'bench.png')
await withTemporaryServer(async (origin) => {
  const { shareUrl } = await seed(origin)
  const browser = await chromium.launch({ executablePath: ensureBrowser(), args: ['--no-sandbox', '--disable-gpu'] })
  try {
    const page = await browser.newPage({ viewport: { width: 1440, height: 900 }, reducedMotion: 'reduce', colorScheme: 'light' })
    await page.goto(shareUrl)
    await page.waitForSelector('[data-test="plane"][data-point-x]')
    await page.waitForLoadState('load')
    await page.waitForTimeout(1000)
    await page.screenshot({ path: file })
  } finally {
    await browser.close()
  }
})
console.log(`Wrote ${file}`)
