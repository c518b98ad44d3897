import { niceStep } from '~/utils/nice-step'

/** The multiples of `step` in [from, to], free of accumulated rounding. */
export function scaleMarks(from: number, to: number, step: number): number[] {
  const first = Math.ceil(from / step - 1e-9)
  const last = Math.floor(to / step + 1e-9)
  const marks: number[] = []
  for (let n = first; n <= last && marks.length < 1000; n++) marks.push(n === 0 ? 0 : n * step)
  return marks
}

/** The decimals that tell two neighbours on a scale of this step apart. */
export function decimalsOf(step: number): number {
  return Math.max(0, -Math.floor(Math.log10(step) + 1e-9))
}

/** A number on a scale, with a true minus sign: 0.5, −2, 3e6. */
export function formatMark(value: number, step: number): string {
  if (value === 0) return '0'
  const size = Math.abs(value)
  const text = size >= 1e5 || step < 1e-4 ? scientific(size, step) : trimZeros(size.toFixed(decimalsOf(step)))
  return (value < 0 ? '−' : '') + text
}

/** A number on the imaginary axis: j, −j, 2j, 0.5j. */
export function formatImaginaryMark(value: number, step: number): string {
  const text = formatMark(value, step)
  if (value === 0) return text
  return `${text.replace(/^(−?)1$/, '$1')}j`
}

const trimZeros = (decimal: string) => decimal.includes('.') ? decimal.replace(/\.?0+$/, '') : decimal

function scientific(size: number, step: number): string {
  const digits = Math.max(0, Math.floor(Math.log10(size) + 1e-9) - Math.floor(Math.log10(step) + 1e-9))
  const [mantissa = '', exponent = ''] = size.toExponential(Math.min(digits, 15)).split('e')
  return `${trimZeros(mantissa)}e${exponent.replace('+', '').replace('-', '−')}`
}

/**
 * The step of a grid whose labels never crowd: at least `leastPixels` apart, and wide enough for the longest label.
 * `widthOf` measures a label in pixels; `scale` is in pixels per rad/s.
 */
export function gridStep(
  range: { from: number, to: number }, scale: number, leastPixels: number, widthOf: (label: string) => number,
): number {
  let step = niceStep(leastPixels / scale)
  for (let tries = 0; tries < 6; tries++) {
    const widest = Math.max(widthOf(formatMark(range.from, step)), widthOf(formatMark(range.to, step)))
    if (step * scale >= widest + 18) break
    step = niceStep(step * 1.5)
  }
  return step
}
