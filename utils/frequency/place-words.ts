import { yOf, type Panel } from '~/utils/response/draw'

/** A rectangle in pixels. */
export interface Box { left: number, right: number, top: number, bottom: number }

/** Where words stand, as SVG anchors them: `start` to the right of x, `end` to its left; y is their base line. */
export interface WordsPlace { x: number, y: number, anchor: 'start' | 'end' }

/** What is drawn already: curves by their value at a share of the width, and other words. */
export interface Taken {
  panel: Panel
  curves: readonly ((share: number) => number)[]
  boxes: readonly Box[]
}

/** Pixels: a mean character of the drawing's words, their height above and below the base line, and what they keep clear of. */
const letter = { width: 6.2, rise: 10, fall: 3 }
const clear = 2
/** What it costs to cover a place of a curve, other words, or the edge; a later candidate is taken for no less than `order`. */
const cost = { curve: 1, words: 6, edge: 20, order: 0.05 }

export function boxOf({ x, y, anchor }: WordsPlace, text: string): Box {
  const width = letter.width * text.length
  return { left: anchor === 'end' ? x - width : x, right: anchor === 'end' ? x : x + width, top: y - letter.rise, bottom: y + letter.fall }
}

/** Of the candidates (one at least), in the order of preference, the one at which the words cover the least. */
export function placeWords(text: string, candidates: readonly WordsPlace[], taken: Taken): WordsPlace {
  const costs = candidates.map((place, order) => covers(boxOf(place, text), taken) + cost.order * order)
  return candidates[costs.indexOf(Math.min(...costs))]!
}

/** Candidates for the name of a curve: above it, to the right where it falls, to the left where it rises; nearest to a share of the width first. */
export function placesAlongCurve(panel: Panel, at: (share: number) => number, prefer: number): WordsPlace[] {
  const count = 40
  return Array.from({ length: count + 1 }, (_, i) => i / count)
    .sort((a, b) => Math.abs(a - prefer) - Math.abs(b - prefer))
    .map((share) => {
      const falls = at(Math.min(1, share + 0.02)) <= at(Math.max(0, share - 0.02))
      const x = panel.left + share * (panel.right - panel.left)
      return { x: falls ? x + 3 : x - 3, y: yOf(panel, at(share)) - 6, anchor: falls ? 'start' as const : 'end' as const }
    })
    .filter(({ y }) => y - letter.rise >= panel.top && y <= panel.bottom)
}

function covers(box: Box, { panel, curves, boxes }: Taken): number {
  const { left, right, top, bottom } = panel
  if (box.left < left + clear || box.right > right - clear || box.top < top || box.bottom > bottom) return cost.edge
  const overlaps = boxes.filter(other =>
    other.left < box.right + clear && other.right > box.left - clear && other.top < box.bottom && other.bottom > box.top)
  return cost.words * overlaps.length + cost.curve * curves.reduce((sum, curve) => sum + crossings(box, panel, curve), 0)
}

/** At how many places across the box the curve runs through it. */
function crossings(box: Box, panel: Panel, curve: (share: number) => number): number {
  const count = Math.max(2, Math.ceil((box.right - box.left) / 5))
  let crossed = 0
  for (let i = 0; i <= count; i++) {
    const x = box.left + (box.right - box.left) * i / count
    const y = yOf(panel, curve((x - panel.left) / (panel.right - panel.left)))
    if (y > box.top - clear && y < box.bottom + clear) crossed++
  }
  return crossed
}
