import type { ScenarioPage, ScenarioSummary } from '#shared/schemas/scenario'

export type ListStatus = ScenarioSummary['status']

/**
 * The table of scenarios. Page, order, search and which pile are read from the address bar and written to it, so that a view
 * can be bookmarked, sent and gone back to.
 */
export async function useScenarioList() {
  const route = useRoute()
  const text = (value: unknown) => typeof value === 'string' ? value : ''
  const search = computed(() => text(route.query.search))
  const sort = computed(() => text(route.query.sort) || '-updatedAt')
  const page = computed(() => Math.max(1, Math.floor(Number(text(route.query.page))) || 1))
  const status = computed<ListStatus>(() => route.query.status === 'deleted' ? 'deleted' : 'draft')

  const { data, error, refresh, status: loading } = await useFetch<ScenarioPage | null>('/api/scenarios', {
    query: { search, sort, page, status },
    key: 'scenario-list',
    default: () => null,
  })
  const pages = computed(() => data.value === null ? 1 : Math.max(1, Math.ceil(data.value.total / data.value.pageSize)))

  /** Another search, order or pile begins at its first page. Typing replaces the entry of the history, a click adds one. */
  function show(change: { search?: string, sort?: string, page?: number, status?: ListStatus }, options: { replace?: boolean } = {}) {
    const next = { search: search.value, sort: sort.value, status: status.value, page: 1, ...change }
    const query: Record<string, string> = {}
    if (next.search !== '') query.search = next.search
    if (next.sort !== '-updatedAt') query.sort = next.sort
    if (next.status !== 'draft') query.status = next.status
    if (next.page > 1) query.page = String(next.page)
    return navigateTo({ path: '/scenarios', query }, { replace: options.replace })
  }

  /** A click on the column that orders already turns the order round; a new column begins with the useful end. */
  function sortBy(column: string) {
    const descendingFirst = column.endsWith('At')
    const present = sort.value.replace('-', '') === column ? sort.value : null
    const turned = present?.startsWith('-') ? column : `-${column}`
    return show({ sort: present ? turned : descendingFirst ? `-${column}` : column })
  }

  return { data, error, refresh, loading, search, sort, page, pages, status, show, sortBy }
}
