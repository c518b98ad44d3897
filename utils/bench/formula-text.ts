/** Coefficients in descending powers of s as a formula that can be typed: 2*s^2 + s + 1. */
function polynomialText(coefficients: readonly number[]): string {
  const order = coefficients.length - 1
  let text = ''
  coefficients.forEach((coefficient, index) => {
    if (coefficient === 0) return
    const power = order - index
    const size = number(Math.abs(coefficient))
    const s = power === 0 ? '' : power === 1 ? 's' : `s^${power}`
    const term = s === '' ? size : size === '1' ? s : `${size}*${s}`
    const sign = coefficient < 0 ? '-' : '+'
    text += text === '' ? (sign === '-' ? '-' : '') + term : ` ${sign} ${term}`
  })
  return text || '0'
}

/** A ratio of polynomials as a formula. */
export function ratioText(numerator: readonly number[], denominator: readonly number[]): string {
  const above = polynomialText(numerator)
  if (denominator.length === 1 && denominator[0] === 1) return above
  const terms = (coefficients: readonly number[]) => coefficients.filter(coefficient => coefficient !== 0).length
  const wrap = (text: string, several: boolean) => several ? `(${text})` : text
  return `${wrap(above, terms(numerator) > 1)} / (${polynomialText(denominator)})`
}

function number(value: number): string {
  return String(Number(value.toPrecision(15)))
}
