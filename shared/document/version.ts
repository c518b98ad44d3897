import { scenarioDocumentSchema, type ScenarioDocument } from '../schemas/document'
import { documentVersion } from './format'

type Step = (document: Record<string, unknown>) => Record<string, unknown>

/** `migrations[n]` turns a document of version n into one of version n + 1. */
const migrations: Record<number, Step> = {}

/**
 * A saved document of any earlier version as the present one.
 * @throws Error when the document comes from a later version or does not fit the schema.
 */
export function readDocument(saved: unknown, savedVersion: number, steps: Record<number, Step> = migrations, present = documentVersion): ScenarioDocument {
  if (!Number.isInteger(savedVersion) || savedVersion < 1 || savedVersion > present) {
    throw new Error(`This document has format ${savedVersion}; this version of the product reads formats 1 to ${present}.`)
  }
  let document = saved as Record<string, unknown>
  for (let version = savedVersion; version < present; version += 1) {
    const step = steps[version]
    if (step === undefined) throw new Error(`There is no way from document format ${version} to ${version + 1}.`)
    document = step(document)
  }
  return scenarioDocumentSchema.parse(document)
}
