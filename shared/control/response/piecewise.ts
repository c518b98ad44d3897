import { nodesPerPiece } from './step-propagator'
import { polynomialAt, type Instant, type Trajectory } from './trajectory'

const last = nodesPerPiece - 1
/** Weights of the barycentric formula for equally spaced nodes: (-1)^j (8 over j). */
const barycentric = [1, -8, 28, -56, 70, -56, 28, -8, 1]
/** Between two nodes a signal that its pieces resolve passes the larger of them by far less than a tenth. */
const betweenNodes = 1.1

/** A signal by pieces, each a polynomial of degree 8 through nine equally spaced values; pieces follow on each other and may jump. */
export class PiecewiseSignal {
  readonly starts: number[] = []
  readonly lengths: number[] = []
  readonly values: Float64Array[] = []

  /** @param bound on the size of the signal: between nodes a corner would throw the polynomial beyond it */
  constructor(private readonly bound = Infinity) {}

  add(start: number, length: number, values: Float64Array): void {
    this.starts.push(start)
    this.lengths.push(length)
    this.values.push(values)
  }

  /** Takes the pieces of another signal that follows on this one. */
  append(other: PiecewiseSignal): void {
    other.values.forEach((values, i) => this.add(other.starts[i]!, other.lengths[i]!, values))
  }

  get end(): number {
    const i = this.starts.length - 1
    return i < 0 ? 0 : this.starts[i]! + this.lengths[i]!
  }

  /** The value just after t; beyond the end that of the last instant. */
  at(t: number): number {
    const i = this.pieceAt(t)
    return Math.max(-this.bound, Math.min(this.bound, interpolate(this.values[i]!, this.position(i, t))))
  }

  /** The slope just after t. */
  slopeAt(t: number): number {
    const i = this.pieceAt(t)
    return slopeOf(this.values[i]!, this.position(i, t)) * last / this.lengths[i]!
  }

  /** The last piece that starts at t or before. */
  pieceAt(t: number): number {
    let low = 0
    let high = this.starts.length
    while (high - low > 1) {
      const middle = (low + high) >> 1
      if (this.starts[middle]! <= t) low = middle
      else high = middle
    }
    return low
  }

  /** Node and fraction, 0..8, within a piece. */
  private position(i: number, t: number): number {
    return Math.min(last, Math.max(0, (t - this.starts[i]!) / this.lengths[i]! * last))
  }
}

/** The polynomial through nine values at a position 0..8. */
export function interpolate(values: Float64Array, position: number): number {
  let above = 0
  let below = 0
  for (let j = 0; j < nodesPerPiece; j++) {
    const gap = position - j
    if (gap === 0) return values[j]!
    const share = barycentric[j]! / gap
    above += share * values[j]!
    below += share
  }
  return above / below
}

/** Derivative of the interpolating polynomial per node distance: that of degree 7 through its values at the nodes. */
function slopeOf(values: Float64Array, position: number): number {
  const nearest = Math.round(position)
  return position === nearest ? slopeAtNode(values, nearest) : interpolate(Float64Array.from(values, (_, node) => slopeAtNode(values, node)), position)
}

function slopeAtNode(values: Float64Array, node: number): number {
  let slope = 0
  for (let j = 0; j < nodesPerPiece; j++) slope += differentiation[node * nodesPerPiece + j]! * values[j]!
  return slope
}

/** Weights of the values in the slope at each node. */
const differentiation = differentiationMatrix()

function differentiationMatrix(): Float64Array {
  const weights = new Float64Array(nodesPerPiece * nodesPerPiece)
  for (let i = 0; i < nodesPerPiece; i++) {
    for (let j = 0; j < nodesPerPiece; j++) {
      if (j === i) continue
      const weight = barycentric[j]! / barycentric[i]! / (i - j)
      weights[i * nodesPerPiece + j] = weight
      weights[i * nodesPerPiece + i]! -= weight
    }
  }
  return weights
}

/** What follows on the pieces, and what the signal tends to. */
export interface Remainder {
  remains: number[]
  decays: boolean
  impulsive?: boolean
  /** The signal from the end of the pieces on; absent: it has come to what remains. */
  tail?: Trajectory
}

/** A signal by pieces as a trajectory: its transient is what the pieces say less what remains. */
export function trajectoryOf(signal: PiecewiseSignal, { remains, decays, impulsive = false, tail }: Remainder): Trajectory {
  const end = signal.end
  const steady = (t: number) => polynomialAt(remains, t)
  const rate = remains.slice(1).map((coefficient, i) => (i + 1) * coefficient)
  const transient = (t: number) => t < end ? signal.at(t) - steady(t) : tail ? tail.transient(t) : 0
  const slope = (t: number) => t < end ? signal.slopeAt(t) - polynomialAt(rate, t) : tail ? tail.slope(t) : 0
  const suffix = suffixMaxima(signal, steady, tail?.envelope(end) ?? 0)
  const nodeCount = signal.starts.length * nodesPerPiece
  const nodeTime = (k: number) => {
    const i = Math.floor(k / nodesPerPiece)
    return signal.starts[i]! + (k % nodesPerPiece) / last * signal.lengths[i]!
  }
  /** The instant of a node; the last one of a piece stands just before the piece ends, so that a jump to the next is seen. */
  const nodeInstant = (k: number): Instant => {
    const i = Math.floor(k / nodesPerPiece)
    const node = k % nodesPerPiece
    const time = nodeTime(k)
    return {
      time, value: signal.values[i]![node]! - steady(time), slope: slopeAtNode(signal.values[i]!, node) * last / signal.lengths[i]! - polynomialAt(rate, time),
      envelope: betweenNodes * suffix[i]!,
    }
  }
  const tailStart = tail ? firstInstantAfter(tail, end) : 0
  return {
    remains,
    decays,
    impulsive,
    transient,
    slope,
    envelope: t => t >= end ? tail?.envelope(t) ?? 0 : betweenNodes * suffix[signal.pieceAt(t)]!,
    instant: k => k < nodeCount ? nodeInstant(k) : tail ? tail.instant(tailStart + k - nodeCount) : null,
    previous(t) {
      if (t > end) return tail ? Math.max(end, tail.previous(t)) : end
      const i = signal.pieceAt(t)
      const spacing = signal.lengths[i]! / last
      const node = Math.ceil((t - signal.starts[i]!) / spacing - 1e-9) - 1
      return node >= 0 ? signal.starts[i]! + node * spacing : i === 0 ? 0 : signal.starts[i]! - signal.lengths[i - 1]! / last
    },
    sample(dt, count) {
      const later = tail?.sample(dt, count)
      return Array.from({ length: count }, (_, k) => k * dt < end ? signal.at(k * dt) : later ? later[k]! : steady(k * dt))
    },
  }
}

/** Largest size of the transient from the start of each piece on. */
function suffixMaxima(signal: PiecewiseSignal, steady: (t: number) => number, beyond: number): Float64Array {
  const suffix = new Float64Array(signal.starts.length)
  let largest = beyond
  for (let i = signal.starts.length - 1; i >= 0; i--) {
    for (let node = 0; node < nodesPerPiece; node++) {
      largest = Math.max(largest, Math.abs(signal.values[i]![node]! - steady(signal.starts[i]! + node / last * signal.lengths[i]!)))
    }
    suffix[i] = largest
  }
  return suffix
}

function firstInstantAfter(tail: Trajectory, end: number): number {
  let k = 0
  for (let instant = tail.instant(k); instant !== null && instant.time <= end; instant = tail.instant(k)) k++
  return k
}
