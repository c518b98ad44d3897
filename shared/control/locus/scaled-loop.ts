import * as complex from '../../numerics/complex'
import type { Complex } from '../../numerics/complex'
import { delayFactor } from '../delay/quasi-polynomial'
import type { FactoredLoop } from './factored-loop'

/**
 * The loop in units of its own figure: z = s/extent, and a gain k with P(z) + sign k Z(z) e^(-z deadTime) = 0, P and Z monic. Tracing in these units needs no
 * regard for physical sizes, and products of factors keep the accuracy of poles and zeros where coefficients lose it.
 */
export interface ScaledLoop {
  extent: number
  /** K = k gainUnit. */
  gainUnit: number
  sign: 1 | -1
  poles: Complex[]
  zeros: Complex[]
  /** In units of 1/extent. */
  deadTime: number
  /** What is left of the work that one drawing may take. */
  allowance: { moves: number }
}

/**
 * Moves of one root over one step. Loops that mean something need a few thousand; places strewn over many decades, or all but coinciding by the
 * dozen, could keep a server busy for seconds. When they are used up the branches go from meeting to meeting in one piece.
 */
const mostMoves = 30_000

/**
 * The loop in units of its figure, with the whole allowance of work.
 * @param extent size of the figure in the units of the loop (rad/s), > 0
 */
export function scaleLoop(loop: FactoredLoop, extent: number): ScaledLoop {
  const shrink = (places: Complex[]) => places.map(place => complex.scale(place, 1 / extent))
  return {
    extent,
    gainUnit: extent ** (loop.poles.length - loop.zeros.length) / Math.abs(loop.gain),
    sign: loop.gain > 0 ? 1 : -1,
    poles: shrink(loop.poles),
    zeros: shrink(loop.zeros),
    deadTime: loop.deadTime * extent,
    allowance: { moves: mostMoves },
  }
}

/** A closed-loop root and its speed dz/d(ln k). */
export interface MovingRoot {
  re: number
  im: number
  velocityRe: number
  velocityIm: number
}

const newtonSteps = 8
/** Newton converges quadratically: a step this small leaves an error far below it. */
const settled = 1e-8
/** Nearer to the origin than this (extents) a distance counts as absolute: it is no part of the figure any more. */
export const smallest = 1e-9

/** The root near a starting point at gain k, by Newton; null where it does not settle. `real` holds it on the real axis. */
export function refine(loop: ScaledLoop, k: number, startRe: number, startIm: number, real: boolean): MovingRoot | null {
  let re = startRe
  let im = real ? 0 : startIm
  for (let round = 0; round < newtonSteps; round++) {
    const p = product(loop.poles, re, im)
    const z = delayed(product(loop.zeros, re, im), loop.deadTime, re, im)
    const factor = loop.sign * k
    const slopeRe = p.slopeRe + factor * z.slopeRe
    const slopeIm = p.slopeIm + factor * z.slopeIm
    const square = slopeRe * slopeRe + slopeIm * slopeIm
    const valueRe = p.re + factor * z.re
    const valueIm = p.im + factor * z.im
    const stepRe = (valueRe * slopeRe + valueIm * slopeIm) / square
    const stepIm = real ? 0 : (valueIm * slopeRe - valueRe * slopeIm) / square
    re -= stepRe
    im -= stepIm
    const step = Math.abs(stepRe) + Math.abs(stepIm)
    if (!Number.isFinite(step)) return null
    if (step <= settled * (smallest + Math.abs(re) + Math.abs(im))) {
      return {
        re,
        im,
        velocityRe: -factor * (z.re * slopeRe + z.im * slopeIm) / square,
        velocityIm: real ? 0 : -factor * (z.im * slopeRe - z.re * slopeIm) / square,
      }
    }
  }
  return null
}

interface Value { re: number, im: number, slopeRe: number, slopeIm: number }

/** prod(z - places) and its slope. */
function product(places: Complex[], x: number, y: number): Value {
  let re = 1
  let im = 0
  let slopeRe = 0
  let slopeIm = 0
  for (let i = 0; i < places.length; i++) {
    const a = x - places[i]!.re
    const b = y - places[i]!.im
    const nextSlope = slopeRe * a - slopeIm * b + re
    slopeIm = slopeRe * b + slopeIm * a + im
    slopeRe = nextSlope
    const next = re * a - im * b
    im = re * b + im * a
    re = next
  }
  return { re, im, slopeRe, slopeIm }
}

/** A value and its slope times e^(-z deadTime). */
function delayed(value: Value, deadTime: number, x: number, y: number): Value {
  if (deadTime === 0) return value
  const { re, im } = delayFactor({ re: x, im: y }, deadTime)
  const slopeRe = value.slopeRe - deadTime * value.re
  const slopeIm = value.slopeIm - deadTime * value.im
  return {
    re: value.re * re - value.im * im, im: value.re * im + value.im * re,
    slopeRe: slopeRe * re - slopeIm * im, slopeIm: slopeRe * im + slopeIm * re,
  }
}

/**
 * How roots leave an m-fold root z0 of gain k0: (z - z0)^m = c (k - k0) to first order; c is returned.
 */
export function spreadFactor(loop: ScaledLoop, k0: number, z0: Complex, m: number): Complex {
  const p = taylor(loop.poles, z0, m)
  const z = delayedTaylor(taylor(loop.zeros, z0, m), loop.deadTime, z0)
  const highest = complex.add(p[m]!, complex.scale(z[m]!, loop.sign * k0))
  return complex.scale(complex.divide(z[0]!, highest), -loop.sign)
}

/** Taylor coefficients 0..m of prod(z - places) about z0. */
function taylor(places: Complex[], z0: Complex, m: number): Complex[] {
  let coefficients: Complex[] = [complex.one, ...Array.from({ length: m }, () => complex.zero)]
  for (const place of places) {
    const gap = complex.subtract(z0, place)
    coefficients = coefficients.map((c, i) => complex.add(complex.multiply(c, gap), i > 0 ? coefficients[i - 1]! : complex.zero))
  }
  return coefficients
}

/** Taylor coefficients of a function times e^(-z deadTime) about z0. */
function delayedTaylor(coefficients: Complex[], deadTime: number, z0: Complex): Complex[] {
  if (deadTime === 0) return coefficients
  const factor = delayFactor(z0, deadTime)
  const series: number[] = [1]
  for (let i = 1; i < coefficients.length; i++) series.push(series[i - 1]! * -deadTime / i)
  return coefficients.map((_, n) => {
    let sum: Complex = complex.zero
    for (let i = 0; i <= n; i++) sum = complex.add(sum, complex.scale(coefficients[n - i]!, series[i]!))
    return complex.multiply(sum, factor)
  })
}
