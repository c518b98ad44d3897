import * as complex from '../../numerics/complex'
import type { Complex } from '../../numerics/complex'
import * as polynomial from '../../numerics/polynomial'
import { byPlace, roots } from '../../numerics/roots'
import { alongAxis, inUnitFrequency, positiveFrequencies, squaredSize } from '../frequency/along-axis'
import { diesOut } from '../stability'
import { evaluateQuasi, type QuasiPolynomial } from './quasi-polynomial'

/** Order of the rational stand-in for the delay from which the polishing starts: good to about |s| deadTime = its size. */
const padeOrder = 8
/** Angle (radians) below which a crossing is one without any dead time. */
const onAxis = 1e-9
/** Total order that the root finder of polynomials takes. */
const highestOrder = 40
/** Roots of the delay's own chain that are looked for, beyond those up to the highest gain crossover. */
const chainBeyond = 8
const longestChain = 60
const chainRounds = 20
const newtonRounds = 30
/** A step this small (relative) ends the polishing; a residual above `residual` of the terms' size is no root. */
const settled = 1e-15
const residual = 1e-9
/** Slope (relative) below which a root is double: the two are then closer than its square root. */
const doubled = 1e-6
/** Roots closer than this (relative) are one, found twice. */
const same = 1e-7

/** Closed-loop roots of a loop with dead time. */
export interface DelayedRoots {
  /** Those near the origin, conjugates exact, in the order of `roots`. */
  poles: Complex[]
  /** How many lie right of the imaginary axis, counted without finding them; infinite where the delay feeds back as much as it gets at high frequency. */
  unstable: number
}

/**
 * The roots near the origin of D + N e^(-s T), each polished on the exact quasi-polynomial.
 *
 * Starting points: the roots with a rational stand-in for the delay (H. Padé, 1892), the open-loop poles (where resonances far out stay), and for the chain of
 * roots that the delay itself brings the branches of its logarithm, s = (ln(-N/D) + j 2 pi k)/T.
 */
export function delayedRoots(q: QuasiPolynomial): DelayedRoots {
  const { scaled, unit } = inUnitFrequency(q)
  const { poles, unstable } = rootsInUnits({ ...scaled, deadTime: q.deadTime * unit })
  return { poles: poles.map(root => complex.scale(root, unit)), unstable }
}

function rootsInUnits(q: QuasiPolynomial): DelayedRoots {
  const crossovers = gainCrossovers(q)
  const unstable = countUnstable(q, crossovers)
  const starts = [...rationalStarts(q), ...roots(q.denominator), ...chainStarts(q, crossovers), ...crossovers.map(({ frequency }) => ({ re: 0, im: frequency }))]
  const upper: Complex[] = []
  for (const start of starts) {
    if (start.im < 0) continue
    const root = polish(q, start)
    if (root === null || root.im < 0) continue
    if (!upper.some(other => complex.distance(other, root) <= same * Math.max(complex.abs(root), 1e-3 / q.deadTime))) upper.push(root)
  }
  const poles = upper.flatMap(root => isDouble(q, root) ? [root, root] : [root]).flatMap(root => root.im === 0 ? [root] : [root, complex.conjugate(root)]).sort(byPlace)
  return { poles, unstable }
}

/** Whether every one of the infinitely many roots dies out. */
export function delayedStable({ poles, unstable }: DelayedRoots): boolean {
  return unstable === 0 && poles.every(diesOut)
}

/** Two roots that coincide up to rounding end the polishing on one place, where the slope is gone too. */
function isDouble(q: QuasiPolynomial, root: Complex): boolean {
  const { slope, size } = evaluateQuasi(q, root)
  return complex.abs(slope) * complex.abs(root) <= doubled * size
}

interface GainCrossover { frequency: number, /** Sign of d(|D|^2 - |N|^2)/dw: 1 where roots move right with growing dead time. */ sense: number }

function gainCrossovers({ numerator, denominator }: QuasiPolynomial): GainCrossover[] {
  const excess = polynomial.subtract(squaredSize(alongAxis(denominator)), squaredSize(alongAxis(numerator)))
  const slope = polynomial.derivative(excess)
  return positiveFrequencies(excess).map(frequency => ({ frequency, sense: Math.sign(polynomial.evaluate(slope, frequency * frequency)) }))
}

/**
 * Roots in the right half plane, counted by following the dead time from 0 to its value: roots cross the axis at the gain crossovers alone, always the same way
 * at each, at dead times that the angle there tells.
 * Source: K. Walton, J. E. Marshall, "Direct method for TDS stability analysis", IEE Proceedings D 134 (1987), from memory.
 */
function countUnstable({ numerator, denominator, deadTime }: QuasiPolynomial, crossovers: GainCrossover[]): number {
  const [nLead, dLead] = [polynomial.leading(numerator), polynomial.leading(denominator)]
  if (numerator.length === denominator.length && Math.abs(nLead) >= Math.abs(dLead)) return Infinity
  let count = roots(polynomial.add(denominator, numerator)).filter(({ re, im }) => diesOut({ re: -re, im })).length
  for (const { frequency, sense } of crossovers) {
    const s = { re: 0, im: frequency }
    const ratio = complex.divide(polynomial.evaluateComplex(denominator, s), polynomial.evaluateComplex(numerator, s))
    const turn = 2 * Math.PI
    // e^(-jwT) = -D/N.
    const turned = (-complex.arg(complex.negate(ratio)) + turn) % turn
    const onAxisAtZero = Math.min(turned, turn - turned) < onAxis
    const crossings = Math.max(0, Math.floor((frequency * deadTime - (onAxisAtZero ? 0 : turned)) / turn) + 1)
    // A pair that stands on the axis without dead time is not among those on the right: if it leaves to the left, it never crossed.
    count += 2 * sense * (onAxisAtZero && sense < 0 ? crossings - 1 : crossings)
  }
  return count
}

/** Roots with the diagonal Padé approximant in place of the delay. */
function rationalStarts({ numerator, denominator, deadTime }: QuasiPolynomial): Complex[] {
  const order = Math.max(1, Math.min(padeOrder, highestOrder - (denominator.length - 1)))
  const ascending: number[] = [1]
  for (let k = 1; k <= order; k++) ascending.push(ascending[k - 1]! * (order - k + 1) / (k * (2 * order - k + 1)) * deadTime)
  const below = [...ascending].reverse()
  const above = below.map((coefficient, i) => (order - i) % 2 === 0 ? coefficient : -coefficient)
  const whole = polynomial.add(polynomial.multiply(denominator, below), polynomial.multiply(numerator, above))
  return whole.every(Number.isFinite) && !polynomial.isZero(whole) ? roots(whole) : []
}

function chainStarts(q: QuasiPolynomial, crossovers: GainCrossover[]): Complex[] {
  const turns = crossovers.reduce((most, { frequency }) => Math.max(most, frequency * q.deadTime / (2 * Math.PI)), 0)
  const count = Math.min(longestChain, Math.ceil(turns) + chainBeyond)
  return Array.from({ length: count + 1 }, (_, k) => branchOfLogarithm(q, k)).filter(start => start !== null)
}

/** The fixed point of s = (ln(-N/D) + j 2 pi k)/T: towards it the iteration draws ever more strongly as |s| T grows. */
function branchOfLogarithm({ numerator, denominator, deadTime }: QuasiPolynomial, k: number): Complex | null {
  let s: Complex = { re: 0, im: (2 * k + 0.5) * Math.PI / deadTime }
  for (let round = 0; round < chainRounds; round++) {
    const ratio = complex.negate(complex.divide(polynomial.evaluateComplex(numerator, s), polynomial.evaluateComplex(denominator, s)))
    const next = { re: Math.log(complex.abs(ratio)) / deadTime, im: (complex.arg(ratio) + 2 * Math.PI * k) / deadTime }
    if (!complex.isFinite(next)) return null
    const moved = complex.distance(next, s)
    s = next
    if (moved <= 1e-3 * complex.abs(s)) break
  }
  return s.im >= 0 ? s : null
}

/** Newton on the quasi-polynomial itself; null where it does not end on a root. A root all but on the real axis is real. */
function polish(q: QuasiPolynomial, start: Complex): Complex | null {
  let s = start
  for (let round = 0; round < newtonRounds; round++) {
    const { value, slope } = evaluateQuasi(q, s)
    const step = complex.divide(value, slope)
    if (!complex.isFinite(step)) return null
    s = complex.subtract(s, step)
    if (start.im === 0) s = { re: s.re, im: 0 }
    if (complex.abs(step) <= settled * complex.abs(s)) break
  }
  if (Math.abs(s.im) <= same * Math.abs(s.re)) s = { re: s.re, im: 0 }
  const { value, size } = evaluateQuasi(q, s)
  return complex.abs(value) <= residual * size ? s : null
}
