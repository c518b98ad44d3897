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

/** Where flags stand; one that would cover another gets a longer pole. */
export function placeFlags<Flag extends { point: Complex }>(flags: readonly Flag[], viewport: Viewport): FlagPlace<Flag>[] {
  const placed: FlagPlace<Flag>[] = []
  for (const flag of flags) {
    const foot = toScreen(viewport, flag.point)
    const cloth = { x: foot.x, y: foot.y - flagSize.pole - flagSize.height }
    const covers = (other: FlagPlace<Flag>) =>
      Math.abs(other.cloth.x - cloth.x) < flagSize.width && Math.abs(other.cloth.y - cloth.y) < flagSize.height + 2
    while (placed.some(covers)) cloth.y -= flagSize.height + 3
    placed.push({ flag, foot, cloth })
  }
  return placed
}
