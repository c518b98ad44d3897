import type { ScenarioDocument } from '#shared/schemas/document'

/** A document from the browser's own store, which may be of an older version or tampered with; null when it does not hold. */
export async function readDocument(stored: unknown): Promise<ScenarioDocument | null> {
  const { scenarioDocumentSchema } = await import('#shared/schemas/document')
  const result = scenarioDocumentSchema.safeParse(stored)
  return result.success ? result.data : null
}
