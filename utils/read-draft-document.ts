import type { ScenarioDocument } from '#shared/schemas/document'
import type { LocalDraft } from './local-drafts'

/** The document of a draft from the browser's own store, which may be of an older format or tampered with; null when it does not hold. */
export async function readDraftDocument({ document, documentVersion }: LocalDraft): Promise<ScenarioDocument | null> {
  const { readDocument } = await import('#shared/document/version')
  try {
    return readDocument(document, documentVersion)
  } catch {
    return null
  }
}
