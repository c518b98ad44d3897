import { pointFromDamping } from '#shared/control/design-point'
import { InvalidInputError } from '#shared/control/errors'
import type { DesignTarget } from '#shared/control/solve'
import type { SolveBody } from '#shared/schemas/design'

/** Where a request says the design stands: the wanted point in either form, or gains as they are. */
export function designTarget({ designPoint, gains }: Pick<SolveBody, 'designPoint' | 'gains'>): DesignTarget {
  if (gains !== undefined) return { gains }
  if (designPoint === undefined) throw new InvalidInputError('designPoint', 'give either designPoint or gains')
  if ('re' in designPoint) return { designPoint }
  return { designPoint: pointFromDamping(designPoint.dampingRatio, designPoint.naturalFrequency) }
}
