import { documentVersion } from '#shared/document/format'

/** Work that the server does not have yet, kept in the browser so that a reload or a dead battery loses nothing. */
export interface LocalDraft {
  title: string
  machine: string
  axis: string
  document: unknown
  documentVersion: number
  /** The version that the work began from; null for a bench that was never saved. */
  version: number | null
  keptAt: string
}

const prefix = 'polewright:'

/** The bench at `/`, before it is saved. */
export const demoDraftKey = `${prefix}draft`

/** Unsaved changes to a scenario. Its page opens only for those whose scenario it is, and only that page reads them. */
export const scenarioDraftKey = (scenarioId: string) => `${prefix}unsaved:${scenarioId}`

/** Storage may be full, or forbidden by the browser's settings: then there is simply no draft. */
export function keepDraft(storage: Storage, key: string, work: Omit<LocalDraft, 'documentVersion' | 'keptAt'>): boolean {
  const draft: LocalDraft = { ...work, documentVersion, keptAt: new Date().toISOString() }
  try {
    storage.setItem(key, JSON.stringify(draft))
    return true
  } catch {
    return false
  }
}

/** The draft under a key, or null when there is none or it cannot be read. The document is still to be validated. */
export function readDraft(storage: Storage, key: string): LocalDraft | null {
  try {
    const stored: unknown = JSON.parse(storage.getItem(key) ?? 'null')
    return isDraft(stored) ? stored : null
  } catch {
    return null
  }
}

export function dropDraft(storage: Storage, key: string): void {
  try {
    storage.removeItem(key)
  } catch {
    // Nothing could be kept there either.
  }
}

/** Signing out leaves nothing of a person's scenarios behind in the browser. */
export function dropAllDrafts(storage: Storage): void {
  try {
    const ours = Object.keys(storage).filter(key => key.startsWith(prefix))
    for (const key of ours) storage.removeItem(key)
  } catch {
    // Nothing could be kept there either.
  }
}

function isDraft(value: unknown): value is LocalDraft {
  if (typeof value !== 'object' || value === null) return false
  const { title, machine, axis, document, documentVersion, version, keptAt } = value as Record<string, unknown>
  return [title, machine, axis, keptAt].every(text => typeof text === 'string')
    && typeof documentVersion === 'number'
    && (version === null || typeof version === 'number')
    && typeof document === 'object' && document !== null
}
