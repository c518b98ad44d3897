import type { DesignSolution, Gains } from '#shared/control/types'
import { formatFigure } from './format'
import { namedGains } from './gain-words'

export interface GainChoice {
  /** `alternative` of the controller form. */
  index: number
  gains: Gains
  chosen: boolean
  words: string
}

/** All gains that reach the design point, in the order that the form fixes, for a solution that was asked with this `alternative`. */
export function gainChoices({ gains, alternatives }: Pick<DesignSolution, 'gains' | 'alternatives'>, wanted = 0): GainChoice[] {
  const chosen = wanted <= alternatives.length ? wanted : 0
  return [...alternatives.slice(0, chosen), gains, ...alternatives.slice(chosen)].map((each, index) => ({
    index, gains: each, chosen: index === chosen, words: namedGains(each).map(({ name, value }) => `${name} ${formatFigure(value, 3)}`).join(', '),
  }))
}
