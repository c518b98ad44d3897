/**
 * The bench at `/` before it is saved: every change is kept in the browser and comes back after a reload.
 * `keep` watches for the life of the scope; `restore` puts the kept work on the bench and says when it was kept.
 */
export function useDemoDraft() {
  const bench = useBenchStore()

  function keep() {
    watch(() => [bench.document, bench.title, bench.machine, bench.axis, bench.gestureStart], () => {
      if (bench.mode !== 'demo' || bench.gestureStart !== null) return
      const { title, machine, axis } = bench
      keepDraft(localStorage, demoDraftKey, { title, machine, axis, document: toRaw(bench.document), version: null })
    })
  }

  async function restore(): Promise<string | null> {
    const draft = readDraft(localStorage, demoDraftKey)
    if (draft === null) return null
    const document = await readDraftDocument(draft)
    if (document === null) {
      forget()
      return null
    }
    bench.load({ document, title: draft.title, machine: draft.machine, axis: draft.axis, mode: 'demo' })
    return draft.keptAt
  }

  function forget() {
    dropDraft(localStorage, demoDraftKey)
  }

  return { keep, restore, forget }
}
