import type { Complex } from '#shared/numerics/complex'
import { toScreen, type ScreenPoint, type Viewport } from './viewport'

export const flagSize = { width: 24, height: 20, pole: 20 }

export interface FlagPlace<Flag> {
  flag: Flag
  /** The place that the comment is about. */
  foot: ScreenPoint
  /** Upper left corner of the cloth. */
  cloth: ScreenPoint
}

/** Room that the design point needs around it, to be seen and to be grabbed. */
const handRoom = 16

/** Where the flags in view stand; one that would cover another, or the design point, gets a longer pole. */
export function placeFlags<Flag extends { point: Complex }>(flags: readonly Flag[], viewport: Viewport, designPoint: Complex): FlagPlace<Flag>[] {
  const hand = toScreen(viewport, designPoint)
  const placed: FlagPlace<Flag>[] = []
  for (const flag of flags) {
    const foot = toScreen(viewport, flag.point)
    const isInView = foot.x >= 0 && foot.x <= viewport.width && foot.y >= 0 && foot.y <= viewport.height
    if (!isInView) continue
    const cloth = { x: foot.x, y: foot.y - flagSize.pole - flagSize.height }
    const covers = (other: FlagPlace<Flag>) =>
      Math.abs(other.cloth.x - cloth.x) < flagSize.width && Math.abs(other.cloth.y - cloth.y) < flagSize.height + 2
    const coversHand = () =>
      hand.x > cloth.x - handRoom && hand.x < cloth.x + flagSize.width + handRoom
      && hand.y > cloth.y - handRoom && hand.y < cloth.y + flagSize.height + handRoom
    while (coversHand() || placed.some(covers)) cloth.y -= flagSize.height + 3
    placed.push({ flag, foot, cloth })
  }
  return placed
}
