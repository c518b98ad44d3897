interface ServerEvent {
  event: string
  data: unknown
}

/** Reads a stream of server-sent events, once its first bytes arrived. */
export async function readEvents(address: string, cookie = '') {
  const abort = new AbortController()
  const response = await fetch(address, { headers: { cookie }, signal: abort.signal })
  if (response.status !== 200 || response.body === null) throw new Error(`No stream: ${response.status}`)
  const reader = response.body.pipeThrough(new TextDecoderStream()).getReader()
  const waiting: ServerEvent[] = []
  let buffer = (await reader.read()).value ?? ''

  async function more(): Promise<boolean> {
    const { value, done } = await reader.read()
    buffer += value ?? ''
    const blocks = buffer.split('\n\n')
    buffer = blocks.pop() ?? ''
    waiting.push(...blocks.map(parse))
    return !done
  }

  return {
    /** The data of the next event of this name. */
    async next(name: string): Promise<unknown> {
      for (;;) {
        const index = waiting.findIndex(event => event.event === name)
        if (index >= 0) return waiting.splice(index, 1)[0]?.data
        if (!await more()) throw new Error(`The stream ended before an event "${name}" came.`)
      }
    },
    /** True once the server ended the stream. */
    async ended(): Promise<boolean> {
      while (await more());
      return true
    },
    close: () => abort.abort(),
  }
}

function parse(block: string): ServerEvent {
  const field = (name: string) => new RegExp(`^${name}: ?(.*)$`, 'm').exec(block)?.[1] ?? ''
  const data = field('data')
  return { event: field('event'), data: data === '' ? null : JSON.parse(data) }
}
