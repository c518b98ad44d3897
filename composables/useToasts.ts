export interface Toast {
  id: number
  message: string
  action?: { label: string, run: () => void | Promise<void> }
}

/** Counted on, never used again: who shows a message may dismiss it late. */
let lastId = 0

/** Short messages that go by themselves (see `ToastNote`), each with one action at most (say, Undo). */
export function useToasts() {
  const toasts = useState<Toast[]>('toasts', () => [])

  function dismiss(id: number) {
    toasts.value = toasts.value.filter(toast => toast.id !== id)
  }

  /** Returns the id to dismiss it by. */
  function show(message: string, action?: Toast['action']): number {
    lastId += 1
    const id = lastId
    toasts.value = [...toasts.value, { id, message, action }]
    return id
  }

  return { toasts, show, dismiss }
}
