import type { CreateLinkBody, ShareLink } from '#shared/schemas/link'

/** The share links of one scenario, newest first. */
export function useShareLinks(scenarioId: string) {
  const address = `/api/scenarios/${scenarioId}/links`
  const links = ref<ShareLink[]>([])
  const loaded = ref(false)
  const failure = ref<string | null>(null)

  async function attempt(act: () => Promise<void>) {
    failure.value = null
    try {
      await act()
    } catch (thrown) {
      failure.value = readFailure(thrown).message
    }
  }

  const load = () => attempt(async () => {
    links.value = (await callApi<{ links: ShareLink[] }>(address)).links
    loaded.value = true
  })

  const create = (body: CreateLinkBody) => attempt(async () => {
    const link = await callApi<ShareLink>(address, { method: 'POST', body })
    links.value = [link, ...links.value]
  })

  const revoke = (link: ShareLink) => attempt(async () => {
    await callApi(`${address}/${link.id}`, { method: 'DELETE' })
    links.value = links.value.filter(({ id }) => id !== link.id)
  })

  return { links, loaded, failure, load, create, revoke }
}
