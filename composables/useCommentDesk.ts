import type { Anchor, Comment, CreateGuestCommentBody } from '#shared/schemas/comment'

export type CommentDesk = ReturnType<typeof useCommentDesk>

/** The comments of one scenario, by its owner's address or by a share link, and what is being done with them on the page. */
export function useCommentDesk(options: { address: string, mayComment: boolean, mayResolve: boolean, asksName: boolean }) {
  const { data, error, refresh } = useFetch<{ comments: Comment[] }>(`${options.address}/comments`, { default: () => ({ comments: [] }) })
  const threads = computed(() => threadsOf(data.value.comments))
  const selected = ref<string | null>(null)
  const anchor = ref<Anchor | null>(null)
  const news = ref('')
  /** Counts the places pointed out on the bench, each of which asks for the text of a comment. */
  const pointedOut = ref(0)

  const pins = computed(() => pinsOf(threads.value, selected.value))

  function select(id: string | null) {
    selected.value = id
  }

  async function post(body: CreateGuestCommentBody) {
    const comment = await callApi<Comment>(`${options.address}/comments`, { method: 'POST', body })
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

  /** Somebody, perhaps this very page, wrote or resolved something. */
  function hear(comment: Comment) {
    const isNew = !data.value.comments.some(({ id }) => id === comment.id)
    put(comment)
    if (isNew) news.value = `New comment by ${comment.authorName}.`
  }

  /** What the comment to be written is about. */
  function point(place: Anchor | null) {
    anchor.value = place
  }

  function pin(place: Anchor) {
    point(place)
    pointedOut.value += 1
  }

  const { mayComment, mayResolve, asksName } = options
  return reactive({ threads, pins, error, selected, anchor, pointedOut, news, mayComment, mayResolve, asksName, post, setResolved, hear, refresh, pin, select, point })
}
