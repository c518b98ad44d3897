import { createEventStream, type H3Event } from 'h3'
import type { Comment } from '#shared/schemas/comment'
import { limitStreams } from './limits'
import { atShutdown } from './shutdown'

/** What watchers of a scenario are told. */
export type LiveEvent =
  | { event: 'comment', data: Comment }
  | { event: 'scenario', data: { version: number, updatedAt: string } | { deleted: true } }

interface Watcher {
  scenarioId: string
  linkId?: string
  tell: (event: LiveEvent) => void
  /** Closes the stream, with a last word if one is given. */
  end: (last?: LiveEvent) => void
}

const watchers = new Set<Watcher>()
const heartbeat = 25_000

/** Tells everyone who watches the scenario and still may. */
export function publish(scenarioId: string, event: LiveEvent) {
  for (const watcher of watchers) if (watcher.scenarioId === scenarioId) watcher.tell(event)
}

/** Ends the streams that came by a link, for when it is revoked. */
export function endStreamsOfLink(linkId: string) {
  for (const watcher of watchers) if (watcher.linkId === linkId) watcher.end()
}

/** Tells all who watch a scenario that it was deleted, and ends their streams. */
export function endStreamsOfScenario(scenarioId: string) {
  for (const watcher of watchers) if (watcher.scenarioId === scenarioId) watcher.end({ event: 'scenario', data: { deleted: true } })
}

/**
 * Answers with a stream of server-sent events. `allowed` is asked before each event and at every heartbeat, so that a session that
 * ended or a link that expired hears nothing more.
 */
export function watch(event: H3Event, place: { scenarioId: string, linkId?: string }, allowed: () => boolean | Promise<boolean>) {
  const leave = limitStreams(event)
  const stream = createEventStream(event)
  const close = () => stream.close()
  const push = (told: LiveEvent) => stream.push({ event: told.event, data: JSON.stringify(told.data) })
  // One after the other, so that events arrive in the order in which they happened.
  let line: Promise<void> = Promise.resolve()
  const inLine = (work: () => Promise<void>) => {
    line = line.then(work).catch(close)
  }
  const ifAllowed = (work: () => Promise<void>) => inLine(async () => await allowed() ? work() : close())
  const beat = () => ifAllowed(() => stream.push({ event: 'beat', data: '' }))
  const watcher: Watcher = {
    ...place,
    tell: told => ifAllowed(() => push(told)),
    end: last => inLine(async () => {
      if (last !== undefined) await push(last)
      await close()
    }),
  }
  const timer = setInterval(beat, heartbeat)
  const forget = atShutdown(close)
  watchers.add(watcher)
  stream.onClosed(() => {
    clearInterval(timer)
    forget()
    leave()
    watchers.delete(watcher)
  })
  beat()
  return stream.send()
}
