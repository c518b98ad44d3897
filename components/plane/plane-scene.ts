import type { Complex } from '#shared/numerics/complex'
import type { LoopAnalysis } from '#shared/control/types'
import type { FlagPlace } from '~/utils/plane/flags'
import type { Region } from '~/utils/plane/regions'
import type { ScreenPoint, Viewport } from '~/utils/plane/viewport'
import type { PlaneColors } from '~/utils/plane/colors'

/** What each layer is painted from: narrow, so that a drag repaints the top layer alone. */
export interface GroundScene {
  viewport: Viewport
  colors: PlaneColors
  regions: Region[]
}

export interface LocusScene {
  viewport: Viewport
  colors: PlaneColors
  analysis: LoopAnalysis | null
}

export interface HandScene {
  viewport: Viewport
  colors: PlaneColors
  /** Where the design point is drawn: its place, or on its way there. */
  point: Complex
  grip: ScreenPoint | null
  /** A point that one may go to. */
  ghost: Complex | null
  meetings: Complex[]
  roots: Complex[]
  /** The design point is a closed-loop root, exactly. */
  onLocus: boolean
  /** Degrees; null where nothing is known or nothing is left over. */
  leftoverDeg: number | null
  /** The figures wait for the server. */
  stale: boolean
  flags: FlagPlace<{ number: number, selected: boolean }>[]
  /** The place on the locus under the pointer, and its gain in words. */
  hover: { point: Complex, label: string } | null
  /** rad/s: pointed at in the frequency view. */
  frequency: number | null
  turning: boolean
  /** Places that labels keep clear of, such as poles and zeros. */
  marks: Complex[]
  /** What the painter keeps from frame to frame: the side of the point on which its label stands. */
  memory: { labelPlace: number | null }
}
