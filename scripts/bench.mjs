import { benchBrowser } from './bench/browser.mjs'
import { benchEngine, benchGrowth } from './bench/engine.mjs'
import { benchHostile } from './bench/hostile.mjs'
import { benchHttp } from './bench/http.mjs'
import { printTable } from './bench/table.mjs'
import { ensureBrowser, ensureBuild, ensurePackages } from './prepare.mjs'
import { withTemporaryServer } from './temporary-server.mjs'

/** How fast the product is on this machine, as tables. It judges nothing: timing has no place in a pass or fail. */

ensurePackages()
ensureBuild()

console.log(`Node ${process.version} on ${process.platform} ${process.arch}\n`)
printTable('Engine, in process (ms)', await benchEngine())
printTable('Growth with the order of the plant: medians (ms)', await benchGrowth())
printTable('Hostile loops, in process: the dearest of each (ms)', await benchHostile())
await withTemporaryServer(async (origin) => {
  printTable('POST /api/design/solve over keep-alive HTTP, order 3 and 6', await benchHttp(origin))
  const { drag, javascript } = await benchBrowser(origin, ensureBrowser())
  printTable('Pointer move to painted readout in Chromium (ms)', drag)
  printTable('JavaScript of / (bytes)', javascript)
})
