/** Things that must end when the server stops, such as open event streams. */
const endings = new Set<() => void>()

/** Registers something to end at shutdown; the answer takes it off the list again. */
export function atShutdown(end: () => void): () => void {
  endings.add(end)
  return () => endings.delete(end)
}

export function endAll() {
  for (const end of endings) end()
  endings.clear()
}
