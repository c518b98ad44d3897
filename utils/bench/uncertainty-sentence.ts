import type { DesignSolution } from '#shared/control/types'

/** One plain sentence on the marked figures, that is on those which rounding may move further than their digits show; null where nothing is uncertain. */
export function uncertaintySentence({ uncertain }: Pick<DesignSolution, 'uncertain'>): string | null {
  if (uncertain.includes('stable')) return 'Uncertain: a root lies so close to the imaginary axis that rounding decides whether the loop is stable.'
  if (uncertain.some(name => name !== 'closedLoopPoles')) return 'Figures marked ? are uncertain: this loop\'s roots are too sensitive for them to be told to more digits.'
  if (uncertain.length > 0) return 'The roots are uncertain: some lie so close together that rounding parts them. The readings hold all the same.'
  return null
}
