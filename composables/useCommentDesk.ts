import type { Anchor, Comment, CreateGuestCommentBody } from '#shared/schemas/comment'

export type CommentDesk = ReturnType<typeof useCommentDesk>

/** The comments of one scenario, by its owner's address or by a share link, and what is being done with them on the page. */
export function useCommentDesk(options: { address: string, mayComment: boolean, mayResolve: boolean, asksName: boolean }) {
  const toasts = useToasts()
  const session = useSessionStore()
  const { data, error, refresh } = useFetch<{ comments: Comment[] }>(`${options.address}/comments`, { default: () => ({ comments: [] }) })
  const threads = computed(() => threadsOf(data.value.comments))
  const selected = ref<string | null>(null)
  const anchor = ref<Anchor | null>(null)
  /** Counts the places pointed out on the bench, each of which asks for the text of a comment. */
  const pointedOut = ref(0)

  const pins = computed(() => pinsOf(threads.value, selected.value))

  function select(id: string | null) {
    selected.value = id
  }

  /** Selects a comment anew, so that the list scrolls to it even when it is the selected one already. */
  async function show(id: string) {
    select(null)
    await nextTick()
    select(id)
  }

  /** The comment that is being sent from here; its echo may be heard before its answer. */
  let sending: Promise<unknown> | undefined

  async function post(body: CreateGuestCommentBody) {
    const answer = callApi<Comment>(`${options.address}/comments`, { method: 'POST', body })
    sending = answer
    const comment = await answer
    put(comment)
    return comment
  }

  async function setResolved(id: string, resolved: boolean) {
    put(await callApi<Comment>(`${options.address}/comments/${id}`, { method: 'PATCH', body: { resolved } }))
  }

  /** Adds a comment, or replaces the one with its id. */
  function put(comment: Comment) {
    data.value = { comments: [...data.value.comments.filter(({ id }) => id !== comment.id), comment] }
  }

  /** Somebody, perhaps this very person, wrote or resolved something. */
  async function hear(comment: Comment) {
    await sending?.catch(() => {})
    const isNew = !data.value.comments.some(({ id }) => id === comment.id)
    put(comment)
    if (isNew && !isOwn(comment)) tell(comment)
  }

  /** Written by the same person in another window. */
  function isOwn({ guest, authorName }: Comment) {
    return !guest && authorName === session.user?.name
  }

  /** The list may be out of sight, so what is new there is told where the person looks. */
  const told: number[] = []
  function tell({ id, parentId, authorName }: Comment) {
    told.push(toasts.show(`${authorName} ${parentId === null ? 'commented' : 'replied'}.`, { label: 'Show', run: () => show(parentId ?? id) }))
  }
  onScopeDispose(() => told.forEach(toasts.dismiss))

  /** What the comment to be written is about. */
  function point(place: Anchor | null) {
    anchor.value = place
  }

  function pin(place: Anchor) {
    point(place)
    pointedOut.value += 1
  }

  const { mayComment, mayResolve, asksName } = options
  return reactive({ threads, pins, error, selected, anchor, pointedOut, mayComment, mayResolve, asksName, post, setResolved, hear, refresh, pin, select, point })
}
