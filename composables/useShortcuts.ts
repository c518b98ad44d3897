/** Undo and redo by key, wherever the focus is; inside a text field the field's own undo comes first. */
export function useShortcuts() {
  const bench = useBenchStore()

  function press(event: KeyboardEvent) {
    if (!(event.ctrlKey || event.metaKey) || event.altKey || editsText(event.target)) return
    const key = event.key.toLowerCase()
    if (key === 'z' && !event.shiftKey) bench.undo()
    else if (key === 'y' || (key === 'z' && event.shiftKey)) bench.redo()
    else return
    event.preventDefault()
  }

  onMounted(() => window.addEventListener('keydown', press))
  onBeforeUnmount(() => window.removeEventListener('keydown', press))
}

function editsText(target: EventTarget | null): boolean {
  return target instanceof HTMLElement && (target.isContentEditable || ['INPUT', 'TEXTAREA', 'SELECT'].includes(target.tagName))
}
