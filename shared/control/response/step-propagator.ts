import { matrixExponential } from '../../numerics/matrix-exponential'
import type { StateSpace } from './state-space'

/** Values on a piece stand at so many equally spaced nodes, both ends included. */
export const nodesPerPiece = 9
const last = nodesPerPiece - 1

/**
 * Taylor coefficients, times k!, of the j-th Lagrange polynomial over the nodes 0..8 about node i: entry (i * 9 + k) * 9 + j. They turn nine values of an
 * input into its derivatives (per node distance) at each node.
 */
const derivativesAtNodes = lagrangeDerivatives()

/**
 * One step of x' = A x + b w, with w a polynomial of degree 8 through nine values: exact but for rounding. Prepared once for a step length, it serves every
 * step of that length.
 */
export class StepPropagator {
  private readonly n: number
  /** e^(A length), and what the nine values of the input add to the state at the end. */
  private readonly transition: Float64Array
  private readonly drive: Float64Array
  private readonly heldDrive: Float64Array
  /** For each output and node: weights on the state at the start, on the nine values, and on a constant input. */
  private readonly onState: Float64Array[] = []
  private readonly onInput: Float64Array[] = []
  private readonly onHeld: Float64Array[] = []

  /**
   * @param outputs weights on the state, one array for each output, each with what it takes of the input directly
   * @param length seconds
   */
  constructor(system: Pick<StateSpace, 'matrix' | 'input'>, outputs: { weights: Float64Array, direct: number }[], readonly length: number) {
    const n = this.n = system.input.length
    const { transition, moments } = nodeStep(system, length / last)
    for (const { direct } of outputs) {
      this.onState.push(new Float64Array(nodesPerPiece * n))
      const gains = new Float64Array(nodesPerPiece * nodesPerPiece)
      for (let i = 0; i < nodesPerPiece; i++) gains[i * nodesPerPiece + i] = direct
      this.onInput.push(gains)
    }
    let state: Float64Array = new Float64Array(n * n)
    for (let i = 0; i < n; i++) state[i * n + i] = 1
    let drive: Float64Array = new Float64Array(n * nodesPerPiece)
    for (let node = 0; ; node++) {
      outputs.forEach(({ weights }, o) => {
        addRow(weights, state, n, this.onState[o]!, node * n)
        addRow(weights, drive, nodesPerPiece, this.onInput[o]!, node * nodesPerPiece)
      })
      if (node === last) break
      drive = times(transition, drive, n, nodesPerPiece)
      for (let i = 0; i < n; i++) {
        for (let k = 0; k < nodesPerPiece; k++) {
          const moment = moments[i * nodesPerPiece + k]!
          if (moment === 0) continue
          for (let j = 0; j < nodesPerPiece; j++) drive[i * nodesPerPiece + j]! += moment * derivativesAtNodes[(node * nodesPerPiece + k) * nodesPerPiece + j]!
        }
      }
      state = times(transition, state, n, n)
    }
    this.transition = state
    this.drive = drive
    this.heldDrive = rowSums(drive, n)
    this.onHeld = this.onInput.map(gains => rowSums(gains, nodesPerPiece))
  }

  /** The state at the end. */
  end(x: Float64Array, w: Float64Array): Float64Array {
    const end = this.free(x)
    for (let i = 0; i < this.n; i++) for (let j = 0; j < nodesPerPiece; j++) end[i]! += this.drive[i * nodesPerPiece + j]! * w[j]!
    return end
  }

  /** The state at the end under a constant input. */
  endHeld(x: Float64Array, w: number): Float64Array {
    const end = this.free(x)
    for (let i = 0; i < this.n; i++) end[i]! += this.heldDrive[i]! * w
    return end
  }

  /** Nine values of an output. */
  values(output: number, x: Float64Array, w: Float64Array): Float64Array {
    const values = this.freeValues(output, x)
    const gains = this.onInput[output]!
    for (let i = 0; i < nodesPerPiece; i++) for (let j = 0; j < nodesPerPiece; j++) values[i]! += gains[i * nodesPerPiece + j]! * w[j]!
    return values
  }

  /** Nine values of an output under a constant input. */
  valuesHeld(output: number, x: Float64Array, w: number): Float64Array {
    const values = this.freeValues(output, x)
    for (let i = 0; i < nodesPerPiece; i++) values[i]! += this.onHeld[output]![i]! * w
    return values
  }

  private free(x: Float64Array): Float64Array {
    const { n, transition } = this
    const end = new Float64Array(n)
    for (let i = 0; i < n; i++) {
      let sum = 0
      for (let j = 0; j < n; j++) sum += transition[i * n + j]! * x[j]!
      end[i] = sum
    }
    return end
  }

  private freeValues(output: number, x: Float64Array): Float64Array {
    const { n } = this
    const rows = this.onState[output]!
    const values = new Float64Array(nodesPerPiece)
    for (let i = 0; i < nodesPerPiece; i++) {
      let sum = 0
      for (let j = 0; j < n; j++) sum += rows[i * n + j]! * x[j]!
      values[i] = sum
    }
    return values
  }
}

/** e^(A d) and the integrals of e^(A (d - t)) b (t/d)^k/k! dt over 0..d for k = 0..8, from one exponential of the system with a chain of integrators ahead of it. */
function nodeStep({ matrix, input }: Pick<StateSpace, 'matrix' | 'input'>, d: number): { transition: Float64Array, moments: Float64Array } {
  const n = input.length
  const size = n + nodesPerPiece
  const whole = new Float64Array(size * size)
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) whole[i * size + j] = matrix[i * n + j]! * d
    whole[i * size + n] = input[i]! * d
  }
  for (let k = 0; k + 1 < nodesPerPiece; k++) whole[(n + k) * size + n + k + 1] = 1
  const exponential = matrixExponential(whole, size)
  const transition = new Float64Array(n * n)
  const moments = new Float64Array(n * nodesPerPiece)
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) transition[i * n + j] = exponential[i * size + j]!
    for (let k = 0; k < nodesPerPiece; k++) moments[i * nodesPerPiece + k] = exponential[i * size + n + k]!
  }
  return { transition, moments }
}

function lagrangeDerivatives(): Float64Array {
  const table = new Float64Array(nodesPerPiece ** 3)
  for (let i = 0; i < nodesPerPiece; i++) {
    for (let j = 0; j < nodesPerPiece; j++) {
      // Ascending powers of s in prod (i + s - m)/(j - m).
      let p = [1]
      for (let m = 0; m < nodesPerPiece; m++) {
        if (m === j) continue
        const next = new Array<number>(p.length + 1).fill(0)
        p.forEach((c, power) => {
          next[power]! += c * (i - m) / (j - m)
          next[power + 1]! += c / (j - m)
        })
        p = next
      }
      let factorial = 1
      p.forEach((c, k) => {
        if (k > 0) factorial *= k
        table[(i * nodesPerPiece + k) * nodesPerPiece + j] = c * factorial
      })
    }
  }
  return table
}

/** a (n*n) times b (n*columns). */
function times(a: Float64Array, b: Float64Array, n: number, columns: number): Float64Array {
  const result = new Float64Array(n * columns)
  for (let i = 0; i < n; i++) {
    for (let k = 0; k < n; k++) {
      const factor = a[i * n + k]!
      if (factor !== 0) for (let j = 0; j < columns; j++) result[i * columns + j]! += factor * b[k * columns + j]!
    }
  }
  return result
}

/** Adds weights times b (n*columns) to a row of the target. */
function addRow(weights: Float64Array, b: Float64Array, columns: number, target: Float64Array, offset: number): void {
  for (let i = 0; i < weights.length; i++) for (let j = 0; j < columns; j++) target[offset + j]! += weights[i]! * b[i * columns + j]!
}

function rowSums(a: Float64Array, rows: number): Float64Array {
  const columns = nodesPerPiece
  return Float64Array.from({ length: rows }, (_, i) => a.subarray(i * columns, (i + 1) * columns).reduce((sum, entry) => sum + entry, 0))
}
