import type { BrowserContextOptions } from 'playwright-core'
import { afterEach } from 'vitest'
import { BenchPage } from './bench-page'
import type { Visitor } from './browser'
import { newAccount, register, saveAs } from './people-pages'
import { stage } from './stage'

/** A stage for several people, each at a browser of their own; they leave when the test is over. */
export function peopleStage() {
  const { visit, origin } = stage()
  let visitors: Visitor[] = []
  afterEach(async () => {
    const all = visitors
    visitors = []
    for (const one of all) await one.leave()
  })

  async function arrive(options?: BrowserContextOptions): Promise<Visitor> {
    const someone = await visit(options)
    visitors.push(someone)
    return someone
  }

  /** Somebody with a saved scenario on the bench. */
  async function owner(title = 'Heavier hook block') {
    const someone = await arrive()
    await register(someone.page, newAccount('Runa Holt'))
    const bench = await new BenchPage(someone.page).open('/')
    await bench.placePoint(0.55, 0.9)
    await saveAs(someone.page, title)
    return { ...someone, bench }
  }

  return { origin, arrive, owner }
}
