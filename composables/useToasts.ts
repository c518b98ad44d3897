export interface Toast {
  id: number
  message: string
  action?: { label: string, run: () => void | Promise<void> }
}

const staysMs = 10_000

/** Short messages that go by themselves, each with one action at most (say, Undo). */
export function useToasts() {
  const toasts = useState<Toast[]>('toasts', () => [])

  function dismiss(id: number) {
    toasts.value = toasts.value.filter(toast => toast.id !== id)
  }

  function show(message: string, action?: Toast['action']) {
    const id = Math.max(0, ...toasts.value.map(toast => toast.id)) + 1
    toasts.value = [...toasts.value, { id, message, action }]
    setTimeout(() => dismiss(id), staysMs)
  }

  return { toasts, show, dismiss }
}
