import { formatBothWays, formatSpan } from '~/utils/bench/actuation-words'

/** What a loop consists of, as far as its diagram shows it. */
export interface LoopParts {
  /** What the controller block says, and how it is read aloud. */
  controller: { block: string, spoken: string }
  /** Whether the controller feeds kr s y back, beside what it makes of the error. */
  rateGain: boolean
  fixedRate: boolean
  sensor: boolean
  /** Seconds. */
  deadTime: number
  limit?: number
  /** Seconds. */
  samplePeriod?: number
  oneSampleLate: boolean
}

/** Something in the path of the signal, by its middle. */
export interface Stop {
  kind: 'block' | 'sum' | 'limit' | 'switch'
  x: number
  y: number
  width: number
  height: number
  text?: string
  /** Raised behind the text. */
  power?: string
  /** Its figure, above it. */
  caption?: string
  strong?: boolean
}

export interface Wire {
  path: string
  arrow: boolean
  /** Where it passes over other wires without touching them: a margin to lay under it. */
  margin?: string
}

export interface Diagram {
  height: number
  stops: Stop[]
  wires: Wire[]
  /** Where the signals are named. */
  reference: { x: number, y: number }
  output: { x: number, y: number }
}

export const diagramWidth = 262

const top = 30
const sumX = 30
/** From the forward path to the first path that leads back, and from there to the next. */
const below = 38
const apart = 34
const beneath = 64

/**
 * The loop as a drawing. Controller and plant stand in one row; with anything between them they stand in two, since a narrow sheet holds no longer
 * row in legible type.
 */
export function drawLoop(parts: LoopParts): Diagram {
  const inTwoRows = parts.deadTime > 0 || parts.limit !== undefined || parts.samplePeriod !== undefined
  const bottom = inTwoRows ? top + beneath : top
  const innerSum = sum(inTwoRows ? 148 : 142, bottom)
  // What the controller feeds back passes limit, dead time and hold as the rest of its output does.
  const gainSum = inTwoRows ? sum(128, top) : innerSum
  const plant = block(inTwoRows ? 199 : 192, bottom, inTwoRows ? 58 : 64, 'plant')
  const tap = inTwoRows ? 243 : 240
  const back = [
    ...(parts.fixedRate ? [{ to: innerSum, text: 'fixed rate', strong: false }] : []),
    ...(parts.rateGain ? [{ to: gainSum, text: 'kr s', strong: true }] : []),
  ].map((path, index) => ({ ...path, y: bottom + below + apart * index }))
  const outer = bottom + below + apart * back.length

  const error = sum(sumX, top, 18)
  const start = sideways(error).right
  const controllerStops = controllerRow(parts, inTwoRows && parts.rateGain ? gainSum : null)
  const plantStops = [...actuator(parts, bottom), ...(back.some(({ to }) => to === innerSum) ? [innerSum] : []), plant]
  const sensor = { ...block(84, outer, 56, 'sensor'), height: 22 }
  return {
    height: outer + 10 + (parts.sensor ? 12 : 0),
    stops: [
      error, ...controllerStops, ...plantStops, ...(parts.sensor ? [sensor] : []),
      ...back.map(({ text, strong, y }) => ({ ...block(plant.x, y, plant.width - 4, text), height: 22, strong })),
    ],
    wires: [
      { path: `M2 ${top}H${sideways(error).left}`, arrow: true },
      ...(inTwoRows
        ? [...between(start, controllerStops), turn(controllerStops.at(-1)!, plantStops[0]!), ...between(sideways(plantStops[0]!).right, plantStops.slice(1))]
        : between(start, [...controllerStops, ...plantStops])),
      { path: `M${sideways(plant).right} ${bottom}H260`, arrow: true },
      { path: `M${tap} ${bottom}V${outer}H${sumX}V${top + error.height / 2}`, arrow: true },
      ...back.map(({ to, y }) => ({
        path: `M${tap} ${bottom}V${y}H${to.x}V${to.y + to.height / 2}`, arrow: true,
        ...(to.y < bottom ? { margin: `M${to.x} ${bottom + 12}V${to.y + 22}` } : {}),
      })),
    ],
    reference: { x: 4, y: top - 8 },
    output: { x: 253, y: bottom - 8 },
  }
}

function controllerRow({ controller, samplePeriod, oneSampleLate }: LoopParts, gainSum: Stop | null): Stop[] {
  const left = samplePeriod === undefined ? 50 : 82
  const width = gainSum ? 104 - left : 78
  const middle = { ...block(left + width / 2, top, width, controller.block), strong: true }
  const late = oneSampleLate ? [{ ...block(184, top, 26, 'z'), power: '−1' }] : []
  return [
    ...(samplePeriod === undefined ? [] : [{ ...block(60, top, 18), kind: 'switch' as const, caption: formatSpan(samplePeriod) }]),
    middle,
    ...(gainSum ? [gainSum] : []),
    ...(samplePeriod === undefined ? [] : [...late, block(223, top, 32, 'hold')]),
  ]
}

function actuator({ deadTime, limit }: LoopParts, y: number): Stop[] {
  return [
    ...(limit === undefined ? [] : [{ ...block(71, y, 26), kind: 'limit' as const, caption: formatBothWays(limit) }]),
    ...(deadTime > 0 ? [{ ...block(107, y, 28, 'e'), power: '−sT', caption: formatSpan(deadTime) }] : []),
  ]
}

function block(x: number, y: number, width: number, text?: string): Stop {
  return { kind: 'block', x, y, width, height: 30, text }
}

function sum(x: number, y: number, size = 16): Stop {
  return { kind: 'sum', x, y, width: size, height: size }
}

const sideways = ({ x, width }: Stop) => ({ left: x - width / 2, right: x + width / 2 })

/** Wires from a place to the first stop and on from each to the next. */
function between(from: number, stops: Stop[]): Wire[] {
  return stops.map((stop, index) => ({
    path: `M${index === 0 ? from : sideways(stops[index - 1]!).right} ${stop.y}H${sideways(stop).left}`,
    arrow: stop.kind !== 'switch',
  }))
}

/** From the end of the upper row round to the beginning of the lower one. */
function turn(last: Stop, first: Stop): Wire {
  return { path: `M${sideways(last).right} ${last.y}H250V${last.y + 27}H46V${first.y}H${sideways(first).left}`, arrow: true }
}

/** The drawing in words, for those who do not see it. */
export function sayLoop({ controller, rateGain, fixedRate, sensor, deadTime, limit, samplePeriod, oneSampleLate }: LoopParts): string {
  const sampled = samplePeriod === undefined ? '' : ` is sampled every ${formatSpan(samplePeriod)} and`
  const through = [
    controller.spoken,
    ...(oneSampleLate ? ['a computing delay of one sample'] : []),
    ...(samplePeriod === undefined ? [] : ['a hold']),
    ...(limit === undefined ? [] : [`a limit of ${formatBothWays(limit)}`]),
    ...(deadTime > 0 ? [`a dead time of ${formatSpan(deadTime)}`] : []),
  ]
  const around = [
    ...(fixedRate ? ['fixed rate fed back around the plant'] : []),
    ...(rateGain ? [through.length > 1 ? 'kr s fed back behind the gain' : 'kr s fed back around the plant'] : []),
  ]
  const inner = around.length > 0 ? `, with ${around.join(' and ')}` : ''
  return `Block diagram: the error${sampled} goes through ${list(through)} into the plant${inner}; the output is fed back to the sum${sensor ? ' through the sensor' : ''}.`
}

function list(words: string[]): string {
  return words.length === 1 ? words[0]! : `${words.slice(0, -1).join(', ')} and ${words.at(-1)}`
}
