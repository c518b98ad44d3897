import { createEventStream, type H3Event } from 'h3'
import type { Comment } from '#shared/schemas/comment'
import { atShutdown } from './shutdown'

/** What watchers of a scenario are told. */
export type LiveEvent =
  | { event: 'comment', data: Comment }
  | { event: 'scenario', data: { version: number, updatedAt: string } | { deleted: true } }

interface Watcher {
  scenarioId: string
  linkId?: string
  push: (event: LiveEvent) => void
  end: () => void
}

const watchers = new Set<Watcher>()
const heartbeat = 25_000

/** Tells everyone who watches the scenario. */
export function publish(scenarioId: string, event: LiveEvent) {
  for (const watcher of watchers) if (watcher.scenarioId === scenarioId) watcher.push(event)
}

/** Ends the streams that came by a link, for when it is revoked. */
export function endStreamsOfLink(linkId: string) {
  for (const watcher of watchers) if (watcher.linkId === linkId) watcher.end()
}

export function endStreamsOfScenario(scenarioId: string) {
  for (const watcher of watchers) if (watcher.scenarioId === scenarioId && watcher.linkId !== undefined) watcher.end()
}

/**
 * Answers with a stream of server-sent events. `allowed` is asked at every heartbeat, so that a session that ended or a link that
 * expired does not keep watching.
 */
export function watch(event: H3Event, place: { scenarioId: string, linkId?: string }, allowed: () => boolean | Promise<boolean>) {
  const stream = createEventStream(event)
  const end = () => void stream.close()
  const watcher: Watcher = {
    ...place,
    push: told => void stream.push({ event: told.event, data: JSON.stringify(told.data) }),
    end,
  }
  const timer = setInterval(async () => {
    if (await allowed()) void stream.push({ event: 'beat', data: '' })
    else end()
  }, heartbeat)
  const forget = atShutdown(end)
  watchers.add(watcher)
  stream.onClosed(() => {
    clearInterval(timer)
    forget()
    watchers.delete(watcher)
  })
  void stream.push({ event: 'beat', data: '' })
  return stream.send()
}
