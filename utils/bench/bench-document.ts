import { pointFromDamping } from '#shared/control/design-point'
import type { Complex } from '#shared/numerics/complex'
import type { ScenarioDocument } from '#shared/schemas/document'

/** The scenario document as the bench holds it: the design point always in rectangular form. */
export type BenchDocument = Omit<ScenarioDocument, 'designPoint'> & { designPoint: Complex }

/** A design point in rectangular form. */
export function toComplex(point: ScenarioDocument['designPoint']): Complex {
  return 're' in point ? { re: point.re, im: point.im } : pointFromDamping(point.dampingRatio, point.naturalFrequency)
}
