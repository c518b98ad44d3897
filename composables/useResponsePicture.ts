import type { MaybeRefOrGetter } from 'vue'
import { standardStep } from '#shared/control/estimate'
import type { DesignSolution, Requirement } from '#shared/control/types'
import type { Panel } from '~/utils/response/draw'
import { calmRange, extentOf, type Range } from '~/utils/response/scale'

const margin = { left: 50, right: 16, top: 10, bottom: 22, between: 14 }
const effortShare = 0.27

/**
 * What the response strip draws, worked out from a solution and the size of the drawing: two panels that share the time axis, the curves, and
 * the limits of the requirements. Ranges are calm: they move only when they must.
 */
export function useResponsePicture(options: {
  solution: MaybeRefOrGetter<DesignSolution | null>
  requirements: MaybeRefOrGetter<readonly Requirement[]>
  actuatorLimit: MaybeRefOrGetter<number | null>
  width: MaybeRefOrGetter<number>
  height: MaybeRefOrGetter<number>
}) {
  let outputRange: Range | null = null
  let effortRange: Range | null = null
  let input = ''

  return computed(() => {
    const solution = toValue(options.solution)
    const width = toValue(options.width)
    const height = toValue(options.height)
    if (!solution || width < 80 || height < 80) return null
    const { response, readings, stable } = solution
    if (response.input !== input) {
      outputRange = effortRange = null
      input = response.input
    }
    const isStep = response.input === 'reference-step'
    const final = isStep && stable ? readings.finalValue : null
    const limits = isStep && final !== null ? stepLimits(toValue(options.requirements), final) : null
    const estimate = final !== null ? estimateCurve(solution, final) : null
    const reference = referenceOf(response.input, response.time)
    const always = [0, ...(final === null ? [] : [final]), ...(limits?.overshoot ? [limits.overshoot.ceiling] : [])]
    // An unstable design without sampling would squash the picture of the loop that is there.
    const continuous = solution.continuous?.stable ? solution.continuous.response : null
    const actuatorLimit = toValue(options.actuatorLimit)
    outputRange = calmRange(outputRange, extentOf([response.output, continuous?.output ?? [], estimate ?? [], reference ?? []], always))
    effortRange = calmRange(effortRange, extentOf([response.effort], [0]))
    return { ...panels(width, height, response.time, outputRange, effortRange), response, continuous, actuatorLimit, readings, stable, final, limits, estimate, reference, isStep }
  })
}

/** What the output should follow; a load disturbance asks for nothing. */
function referenceOf(input: DesignSolution['response']['input'], time: readonly number[]): readonly number[] | null {
  if (input === 'disturbance-step') return null
  return input === 'reference-ramp' ? time : time.map(() => 1)
}

function panels(width: number, height: number, time: readonly number[], outputRange: Range, effortRange: Range) {
  const shared = { left: margin.left, right: width - margin.right, along: { min: 0, max: time.at(-1)! } }
  const room = height - margin.top - margin.bottom - margin.between
  const parting = margin.top + room * (1 - effortShare)
  const output: Panel = { ...shared, top: margin.top, bottom: parting, value: outputRange }
  const effort: Panel = { ...shared, top: parting + margin.between, bottom: height - margin.bottom, value: effortRange }
  return { output, effort }
}

/** The tightest ceiling and the earliest deadline that the requirements set to the step. */
function stepLimits(requirements: readonly Requirement[], final: number) {
  const tightest = (reading: Requirement['reading']) => requirements
    .filter(requirement => requirement.reading === reading && requirement.limit === 'at-most')
    .reduce<number | null>((least, { value }) => least === null || value < least ? value : least, null)
  const percent = tightest('overshootPercent')
  return {
    overshoot: percent === null ? null : { percent, ceiling: final * (1 + percent / 100) },
    deadline: tightest('settlingTime'),
  }
}

/** The second-order pair at the design point, brought to the same final value. */
function estimateCurve({ response, designPoint: { dampingRatio, naturalFrequency } }: DesignSolution, final: number): number[] | null {
  if (!(dampingRatio > 0) || naturalFrequency === 0) return null
  return response.time.map(t => final * standardStep(dampingRatio, naturalFrequency * t))
}
