import type { BestPoint, Candidate, Hindrance, Limit, SearchRoom } from '#shared/control/best-point/types'
import type { Verdict } from '#shared/control/types'
import { formatFigure } from './format'
import { describeReading, formatReading, sayLimit } from './readings'

const rooms: Record<SearchRoom, string> = { ray: 'on this ray', plane: 'in the plane' }
/** Closer than this (relative) one settling time is as good as another. */
const sameTime = 1e-4

/** What a search found, in a few plain sentences: how fast and where, and what keeps it from being faster. */
export function sayBest(result: BestPoint): string[] {
  const { best, tied, cutShort } = result
  return [
    ...(best ? [sayFound(result, best), sayLimits(result, best)] : sayNothingMet(result)),
    ...(tied ? ['Other points settle just as fast.'] : []),
    ...(cutShort === 'time' ? ['The search took too long and was cut short: there may be a faster point.'] : []),
    ...(cutShort === 'evaluations' ? ['The search was cut short: there may be a faster point.'] : []),
  ]
}

/** Where a point lies. */
export function sayPlace({ designPoint: { dampingRatio, naturalFrequency } }: Pick<Candidate, 'designPoint'>): string {
  return `damping ratio ${formatFigure(dampingRatio, 3)}, ${formatFigure(naturalFrequency, 3)}\u00A0rad/s`
}

export function saySeconds(time: number): string {
  return `${formatFigure(time, 3)}\u00A0s`
}

function sayFound({ over, settlingTimeBefore: before }: BestPoint, best: Candidate): string {
  const time = best.settlingTime!
  if (before !== null && Math.abs(time - before) <= sameTime * before) return `No point ${rooms[over]} settles sooner than in ${saySeconds(time)}, as it does now.`
  return `Settles in ${saySeconds(time)}${before === null ? '' : ` instead of ${saySeconds(before)}`}: ${sayPlace(best)}.`
}

function sayLimits({ binding, places }: BestPoint, best: Candidate): string {
  const required = best.verdicts.length > 0
  const readings = binding.filter(limit => !(limit in otherLimits)).map(limit => describeReading(limit as Verdict['reading']).label)
  if (places !== null) return sayPlaces(places, readings)
  const sentences = binding.flatMap(limit => limit in otherLimits ? [otherLimits[limit as OtherLimit]] : [])
  if (readings.length > 0) sentences.unshift(`${listed(readings)} ${readings.length > 1 ? 'stop' : 'stops'} you there.`)
  if (sentences.length === 0) sentences.push(required ? 'No requirement stops you there: beside it the loop itself settles later.' : 'Nothing is required: the loop itself is the limit.')
  else if (!required) sentences.unshift('Nothing is required.')
  return sentences.join(' ')
}

type OtherLimit = Exclude<Limit, Verdict['reading']>
const otherLimits: Record<OtherLimit, string> = {
  'border': 'It lies at the border of the search: beyond it there may be faster points.',
  'negative-gain': 'Faster points ask for a negative gain.',
  'reach': 'Just beside it this controller reaches no point.',
}

function sayPlaces(places: number, readings: string[]): string {
  if (places === 1) return 'It is the only place where this ray meets the locus.'
  const faster = readings.length > 0 ? `: ${listed(readings).toLowerCase()} ${readings.length > 1 ? 'stop' : 'stops'} you at faster ones` : ', and the fastest'
  return `It is one of ${places} places where this ray meets the locus${faster}.`
}

function sayNothingMet({ over, closest, hindrance, cutShort }: BestPoint): string[] {
  if (!closest) return [sayHindrance(hindrance!, over)]
  const broken = closest.verdicts.filter(({ met }) => !met).map(sayBroken)
  const none = cutShort ? `No point ${rooms[over]} that the search came to meets every requirement.` : `No point ${rooms[over]} meets every requirement.`
  return [none, `The closest breaks ${broken.join(', ')}: ${sayPlace(closest)}.`]
}

function sayBroken(verdict: Verdict): string {
  const description = describeReading(verdict.reading)
  return `${description.label.toLowerCase()} (${formatReading(description, verdict.actual, true)}, ${sayLimit(verdict)})`
}

function sayHindrance(hindrance: Hindrance, over: SearchRoom): string {
  switch (hindrance.kind) {
    case 'unstable': return `No point ${rooms[over]} is stable within the search.`
    case 'negative-gain': return `Every stable point ${rooms[over]} asks for a negative gain.`
    case 'unsettled': return 'The response ends at 0, so that no point has a settling time to compare.'
    case 'unreachable': return `This controller reaches no point ${rooms[over]}: ${hindrance.message}.`
  }
}

function listed(names: string[]): string {
  const [first, ...rest] = names.map((name, n) => n === 0 ? name : name.toLowerCase())
  return rest.length === 0 ? first! : `${[first, ...rest.slice(0, -1)].join(', ')} and ${rest.at(-1)}`
}
