import { instantsPerLength, type Instant } from './trajectory'

/** Angle, in radians, by which the fastest living mode turns during one step of a walk. */
const stepAngle = 0.4
/** A mode smaller than this share of the signal no longer sets the step. */
const extinct = 1e-9
/** A recurrence over equal steps starts afresh this often, before its rounding adds up. */
export const freshStart = 64

/** Weights of the modes: one entry for each real pole and each pair, re + j im of the upper pole's residue (doubled for a pair). */
export interface Modes {
  sigma: Float64Array
  omega: Float64Array
  re: Float64Array
  im: Float64Array
}

/** Instants along a sum of modes, computed once as they are asked for. Steps grow as the fast modes die out. */
export class ModalWalk {
  private readonly instants: Instant[] = []
  private readonly speed: Float64Array
  private readonly diesAt: Float64Array
  private readonly slowest: number
  /** Where the modes stand at the last instant, and the factors that carry them one step on. */
  private readonly x: Float64Array
  private readonly y: Float64Array
  private readonly turnRe: Float64Array
  private readonly turnIm: Float64Array
  private lastStep = NaN
  private sinceStart = 0

  constructor(private readonly modes: Modes, reference: number) {
    const { sigma, omega, re, im } = modes
    this.speed = sigma.map((rate, i) => Math.hypot(rate, omega[i]!))
    this.diesAt = sigma.map((rate, i) => Math.log(Math.max(1, Math.hypot(re[i]!, im[i]!) / (extinct * reference))) / -rate)
    this.slowest = this.speed.reduce((least, one) => Math.min(least, one), Infinity)
    this.x = new Float64Array(sigma.length)
    this.y = new Float64Array(sigma.length)
    this.turnRe = new Float64Array(sigma.length)
    this.turnIm = new Float64Array(sigma.length)
    if (sigma.length > 0) this.standAt(0)
  }

  instant(k: number): Instant | null {
    if (this.modes.sigma.length === 0) return null
    while (this.instants.length <= k) this.advance()
    return this.instants[k]!
  }

  /** The step that the fastest mode still alive at t allows. */
  step(t: number): number {
    let fastest = this.slowest
    for (let i = 0; i < this.speed.length; i++) if (t < this.diesAt[i]! && this.speed[i]! > fastest) fastest = this.speed[i]!
    return stepAngle / fastest
  }

  private advance(): void {
    const { sigma, omega } = this.modes
    const from = this.instants[this.instants.length - 1]!.time
    const step = this.step(from) * 2 ** Math.floor(this.instants.length / instantsPerLength)
    if (step !== this.lastStep) {
      for (let i = 0; i < sigma.length; i++) {
        const size = Math.exp(sigma[i]! * step)
        this.turnRe[i] = size * Math.cos(omega[i]! * step)
        this.turnIm[i] = size * Math.sin(omega[i]! * step)
      }
      this.lastStep = step
    }
    if (++this.sinceStart >= freshStart) {
      this.standAt(from + step)
      return
    }
    for (let i = 0; i < sigma.length; i++) {
      const turned = this.x[i]! * this.turnRe[i]! - this.y[i]! * this.turnIm[i]!
      this.y[i] = this.x[i]! * this.turnIm[i]! + this.y[i]! * this.turnRe[i]!
      this.x[i] = turned
    }
    this.record(from + step)
  }

  private standAt(t: number): void {
    const { sigma, omega, re, im } = this.modes
    for (let i = 0; i < sigma.length; i++) {
      const size = Math.exp(sigma[i]! * t)
      const cos = Math.cos(omega[i]! * t)
      const sin = Math.sin(omega[i]! * t)
      this.x[i] = size * (re[i]! * cos - im[i]! * sin)
      this.y[i] = size * (re[i]! * sin + im[i]! * cos)
    }
    this.sinceStart = 0
    this.record(t)
  }

  private record(time: number): void {
    const { sigma, omega } = this.modes
    let value = 0
    let slope = 0
    let envelope = 0
    for (let i = 0; i < sigma.length; i++) {
      const x = this.x[i]!
      const y = this.y[i]!
      value += x
      slope += sigma[i]! * x - omega[i]! * y
      envelope += Math.sqrt(x * x + y * y)
    }
    this.instants.push({ time, value, slope, envelope })
  }
}
