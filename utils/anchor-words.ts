import type { Anchor } from '#shared/schemas/comment'
import type { RequirementInput } from '#shared/schemas/design'
import { formatComplex, formatFigure } from '~/utils/bench/format'
import { describeReading, sayLimit } from '~/utils/bench/readings'

/** Where a comment points, in words: "on the plane at -1.32 + 1.76j", "on overshoot". */
export function anchorWords(anchor: Anchor | null, requirements: readonly RequirementInput[]): string {
  if (anchor === null) return 'on the scenario'
  switch (anchor.kind) {
    case 'plane': return `on the plane at ${formatComplex(anchor)}`
    case 'response': return `on the response at ${formatFigure(anchor.time, 3)} s`
    case 'reading': return `on ${describeReading(anchor.reading).label.toLowerCase()}`
    case 'requirement': return `on the requirement ${requirementWords(requirements[anchor.index], anchor.index)}`
  }
}

/** "overshoot at most 12 %"; a requirement that was removed since is named by its number. */
export function requirementWords(requirement: RequirementInput | undefined, index: number): string {
  if (!requirement) return `${index + 1} (no longer there)`
  return `${describeReading(requirement.reading).label.toLowerCase()} ${sayLimit(requirement)}`
}
