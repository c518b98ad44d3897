import type { Complex } from '#shared/numerics/complex'

export type Parsed<T> = { value: T } | { problem: string }

const minus = '\u2212'
const size = '(?:\\d+(?:\\.\\d*)?|\\.\\d+)(?:e[+-]?\\d+)?'
const realForm = new RegExp(`^[+-]?${size}$`, 'i')
/** A real part, then an imaginary part that has a sign unless it stands alone. */
const placeForm = new RegExp(`^(?:(?<onReal>[+-]?${size})|(?:(?<re>[+-]?${size})(?=[+±-]))?(?<sign>[+±-]?)(?<size>(?:${size})?)[ij])$`, 'i')

/** A number as people type it: a comma for the decimal point and a typographic minus are understood. */
export function parseNumber(text: string): Parsed<number> {
  // Gaps between thousands, as the fields themselves show them.
  const trimmed = text.trim().replace(/(?<=\d)[\s\u00A0\u2009\u202F](?=\d{3}(?:\D|$))/g, '')
  if (trimmed === '') return { problem: 'a number is missing' }
  const plain = (/^[^.]*,[^.,]*$/.test(trimmed) ? trimmed.replace(',', '.') : trimmed).replace(minus, '-')
  return realForm.test(plain) ? finite(Number(plain), trimmed) : { problem: `“${trimmed}” is not a number` }
}

/** Numbers separated by spaces, commas or semicolons; decimal commas as `splitList` tells them. */
export function parseNumbers(text: string): Parsed<number[]> {
  const items = splitList(text)
  if ('problem' in items) return items
  const numbers: number[] = []
  for (const item of items.value) {
    const parsed = parseNumber(item)
    if ('problem' in parsed) return parsed
    numbers.push(parsed.value)
  }
  return { value: numbers }
}

/**
 * The items of a list. Where blanks or semicolons separate them, a comma between two digits is a decimal comma (1,5 2 is 1.5 and 2); where commas
 * alone do, or the numbers have points, it separates (1,5,2 or 1.5,2). What could be either is refused: the other reading would be another plant without a word.
 */
function splitList(text: string): Parsed<string[]> {
  const trimmed = text.trim()
  const separated = trimmed.split(/[\s,;]+/).filter(Boolean)
  const pair = /[^\s,;]*\d,\d[^\s,;]*/.exec(trimmed)?.[0]
  if (pair === undefined) return { value: separated }
  if (/;|[^\s,;]\s+[^\s,;]/.test(trimmed)) return { value: trimmed.split(/[\s;]+|(?<!\d),|,(?!\d)/).filter(Boolean) }
  if (pair.includes('.') || (separated.length > 2 && !/\s/.test(trimmed))) return { value: separated }
  return { problem: `“${pair}” can be read in two ways: type ${pair.replace(',', '.')} or ${pair.replace(',', ', ')}` }
}

/**
 * Places in the s-plane, separated by spaces, commas or semicolons: -2, -1+3j, -1 ± 3j (also written +-). A complex place brings its conjugate along,
 * unless that is in the list already.
 */
export function parsePlaces(text: string): Parsed<Complex[]> {
  const places: Complex[] = []
  // A sign with room on both sides, or a ±, holds the two parts of one place together.
  const joined = text.replaceAll(minus, '-').replace(/\+\/?-/g, '±').replace(/\s*±\s*(?=[\d.ij])|\s+([+-])\s+/gi, (_, sign?: string) => sign ?? '±')
  const items = splitList(joined)
  if ('problem' in items) return items
  for (const item of items.value) {
    const parsed = parsePlace(item)
    if ('problem' in parsed) return parsed
    places.push(...parsed.value)
  }
  return { value: withConjugates(places) }
}

/** -2, 3j, -1+3j, -1±3j. */
function parsePlace(item: string): Parsed<Complex[]> {
  const match = placeForm.exec(item.replaceAll(',', '.'))
  if (!match) return { problem: `“${item}” is not a place such as −2 or −1 ± 3j` }
  const { onReal, re = '0', sign = '', size } = match.groups!
  if (onReal !== undefined) return finitePlace(Number(onReal), 0, item)
  return finitePlace(Number(re), Number(size || 1) * (sign === '-' ? -1 : 1), item)
}

function finitePlace(re: number, im: number, item: string): Parsed<Complex[]> {
  return Number.isFinite(re) && Number.isFinite(im) ? { value: [{ re, im }] } : { problem: `“${item}” is too large` }
}

/** Adds the conjugates that are missing. */
function withConjugates(places: Complex[]): Complex[] {
  const single = [...places]
  const complete: Complex[] = []
  while (single.length > 0) {
    const place = single.shift()!
    complete.push(place)
    if (place.im === 0) continue
    const partner = single.findIndex(other => other.re === place.re && other.im === -place.im)
    if (partner >= 0) single.splice(partner, 1)
    complete.push({ re: place.re, im: -place.im })
  }
  return complete
}

/** Places as they are typed: conjugates together as -1 ± 3j. */
export function typedPlaces(places: readonly Complex[]): string {
  const write = (value: number) => String(Number(value.toPrecision(12)))
  const rest = [...places]
  const items: string[] = []
  while (rest.length > 0) {
    const place = rest.shift()!
    if (place.im === 0) {
      items.push(write(place.re))
      continue
    }
    const partner = rest.findIndex(other => other.re === place.re && other.im === -place.im)
    if (partner >= 0) rest.splice(partner, 1)
    items.push(`${place.re === 0 ? '' : `${write(place.re)} `}± ${write(Math.abs(place.im))}j`)
  }
  return items.join(', ')
}

function finite(value: number, text: string): Parsed<number> {
  return Number.isFinite(value) ? { value } : { problem: `“${text}” is too large` }
}
