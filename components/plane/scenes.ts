import { computed, toRaw, type ComputedRef, type ShallowRef } from 'vue'
import type { Complex } from '#shared/numerics/complex'
import type { DesignSolution, LoopAnalysis, Requirement } from '#shared/control/types'
import type { PlaneColors } from '~/utils/plane/colors'
import type { FlagPlace } from '~/utils/plane/flags'
import { gripPosition } from '~/utils/plane/ray'
import { forbiddenRegions } from '~/utils/plane/regions'
import type { Viewport } from '~/utils/plane/viewport'
import type { GroundScene, HandScene, LocusScene } from './plane-scene'

interface Figures {
  analysis: LoopAnalysis | null
  solution: DesignSolution | null
  requirements: Requirement[]
  reachesEveryPoint: boolean
  stale: boolean
  ghost: Complex | null
}

interface Hand {
  /** Where the point is drawn, and where it is. */
  drawn: Readonly<ShallowRef<Complex>>
  live: Readonly<ShallowRef<Complex>>
  meetings: ComputedRef<Complex[]>
  flags: ComputedRef<FlagPlace<{ number: number, selected: boolean }>[]>
  hover: ComputedRef<HandScene['hover']>
  frequency: () => number | null
  turning: () => boolean
}

interface Scenes {
  ground: ComputedRef<GroundScene | null>
  locus: ComputedRef<LocusScene | null>
  hand: ComputedRef<HandScene | null>
}

/** What the three canvases are painted from. Each depends on no more than it shows, so that a drag leaves the lower two alone. */
export function composeScenes(
  figures: Figures, view: { viewport: Readonly<ShallowRef<Viewport | null>>, colors: Readonly<ShallowRef<PlaneColors | null>> }, under: Hand,
): Scenes {
  const frame = computed(() => view.viewport.value && view.colors.value && { viewport: view.viewport.value, colors: view.colors.value })
  const regions = computed(() => forbiddenRegions(figures.requirements))
  const marks = computed(() => figures.analysis ? [...figures.analysis.openLoop.poles, ...figures.analysis.openLoop.zeros] : [])
  const memory = { labelPlace: null }

  const onLocus = computed(() => {
    const { solution, stale } = figures
    if (!solution || stale) return false
    const point = under.live.value
    if (figures.reachesEveryPoint || under.meetings.value.some(({ re, im }) => re === point.re && im === point.im)) return true
    const apart = Math.hypot(solution.designPoint.re - point.re, solution.designPoint.im - point.im)
    return solution.onLocus && apart * (view.viewport.value?.scale ?? Infinity) < 0.5
  })
  const ground = computed(() => frame.value && { ...frame.value, regions: regions.value })
  const locus = computed(() => frame.value && { ...frame.value, analysis: toRaw(figures.analysis) })
  const hand = computed(() => frame.value && {
    ...frame.value,
    point: under.drawn.value,
    grip: gripPosition(frame.value.viewport, under.drawn.value),
    ghost: figures.ghost,
    meetings: under.meetings.value,
    roots: figures.solution?.closedLoopPoles ?? [],
    onLocus: onLocus.value,
    leftoverDeg: figures.solution && !onLocus.value ? figures.solution.leftoverAngleDeg : null,
    stale: figures.stale,
    flags: under.flags.value,
    hover: under.hover.value,
    frequency: under.frequency(),
    turning: under.turning(),
    marks: marks.value,
    memory,
  })
  return { ground, locus, hand }
}
