import type { Complex } from '#shared/numerics/complex'

const minus = '\u2212'
/** Between figure and unit, and between thousands: never broken. */
export const gap = '\u00A0'
const superscripts: Record<string, string> = {
  '0': '⁰', '1': '¹', '2': '²', '3': '³', '4': '⁴', '5': '⁵', '6': '⁶', '7': '⁷', '8': '⁸', '9': '⁹', '-': '⁻',
}

/** A figure with a fixed count of significant digits, so that it keeps its width under the hand. */
export function formatFigure(value: number, digits = 4): string {
  if (value === 0) return '0'
  if (!Number.isFinite(value)) return '–'
  const size = Math.abs(value)
  const text = size >= 10 ** Math.max(digits, 5) || size < 1e-4 ? powerOfTen(size, digits) : grouped(significant(size, digits))
  return value < 0 ? minus + text : text
}

/** A figure with a fixed count of decimals: for percent, degrees and decibels. */
export function formatFixed(value: number, decimals: number): string {
  if (!Number.isFinite(value)) return '–'
  const text = Math.abs(value).toFixed(decimals)
  return value < 0 && Number(text) !== 0 ? minus + grouped(text) : grouped(text)
}

/** A number as somebody would type it: no padding, at most 6 significant digits. */
export function formatPlain(value: number, digits = 6): string {
  return String(Number(value.toPrecision(digits))).replace('-', minus)
}

/** A number with every digit that matters, thousands parted: for fields at rest. */
export function formatExact(value: number): string {
  const typed = toTyped(value)
  return typed.includes('e') ? typed : `${value < 0 ? minus : ''}${grouped(typed.replace('-', ''))}`
}

/** A number for an input field: every digit that matters, and nothing that could not be typed back. */
export function toTyped(value: number): string {
  return String(Number(value.toPrecision(12)))
}

/** Text of the server, with its hyphens before figures made minus signs. */
export function withTrueMinus(text: string): string {
  return text.replace(/-(?=\d)/g, minus)
}

/** A place in the s-plane, such as -1.32 + 1.76j. */
export function formatComplex({ re, im }: Complex, digits = 3): string {
  if (im === 0) return formatFigure(re, digits)
  const imaginary = `${formatFigure(Math.abs(im), digits)}j`
  return re === 0 ? (im < 0 ? minus : '') + imaginary : `${formatFigure(re, digits)} ${im < 0 ? minus : '+'} ${imaginary}`
}

/** A polynomial as it is written by hand: 0.5 s² + 3 s + 1. */
export function formatPolynomial(coefficients: readonly number[]): string {
  const order = coefficients.length - 1
  const terms = coefficients.flatMap((coefficient, index) => coefficient === 0 ? [] : [{ coefficient, power: order - index }])
  if (terms.length === 0) return '0'
  return terms.map(({ coefficient, power }, index) => {
    const sign = coefficient < 0 ? (index === 0 ? minus : ` ${minus} `) : index === 0 ? '' : ' + '
    const size = Math.abs(coefficient)
    const factor = size === 1 && power > 0 ? '' : formatPlain(size, 5) + (power > 0 ? gap : '')
    return sign + factor + (power === 0 ? '' : power === 1 ? 's' : `s${raise(power)}`)
  }).join('')
}

/** Text such as "kg m^2" with its powers raised. */
export function formatUnit(unit: string): string {
  return unit.replace(/\^(-?\d+)/g, (_, power: string) => raise(Number(power)))
}

function raise(power: number): string {
  return [...String(power)].map(character => superscripts[character] ?? character).join('')
}

/** Digits beyond the significant ones before the point become zeros, not a power of ten. */
function significant(size: number, digits: number): string {
  return size >= 10 ** digits ? String(Number(size.toPrecision(digits))) : size.toPrecision(digits)
}

function powerOfTen(size: number, digits: number): string {
  const [mantissa, exponent] = size.toExponential(digits - 1).split('e')
  return `${mantissa}${gap}×${gap}10${raise(Number(exponent))}`
}

/** Thin gaps between thousands, from five digits on. */
function grouped(text: string): string {
  const [whole, fraction] = text.split('.')
  const parted = whole!.length > 4 ? whole!.replace(/\B(?=(\d{3})+$)/g, gap) : whole!
  return fraction === undefined ? parted : `${parted}.${fraction}`
}
