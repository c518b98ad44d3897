import { abs, type Complex } from '#shared/numerics/complex'
import { clipSegment } from './clip'
import type { ScreenPoint } from './viewport'

/** A number with so many significant digits, decimals fixed by `size` so that neighbours line up; true minus sign. */
export function formatNumber(value: number, digits = 3, size = Math.abs(value)): string {
  if (!Number.isFinite(value)) return '—'
  if (value === 0 && size === 0) return '0'
  const order = Math.floor(Math.log10(size) + 1e-9)
  const text = order >= 5 || order < -3
    ? Math.abs(value).toExponential(digits - 1).replace('e+', 'e').replace('e-', 'e−')
    : Math.abs(value).toFixed(Math.min(12, Math.max(0, digits - 1 - order)))
  return (value < 0 && Number(text.replace('−', '-')) !== 0 ? '−' : '') + text
}

/** −1.32 + 1.76j; a real one without its imaginary part. */
export function formatPoint(point: Complex): string {
  const size = abs(point)
  if (point.im === 0) return formatNumber(point.re, 3, size)
  const sign = point.im < 0 ? '−' : '+'
  return `${formatNumber(point.re, 3, size)} ${sign} ${formatNumber(Math.abs(point.im), 3, size)}j`
}

/** An angle in degrees as a label says it: exact enough to see how far the point is from the locus. */
export function formatAngle(degrees: number): string {
  const size = Math.abs(degrees)
  if (size > 0 && size < 0.005) return 'under 0.01°'
  return `${formatNumber(degrees, 3, size >= 10 ? size : 1)}°`
}

export interface Placement {
  /** Which candidate was chosen, to be handed back next time. */
  index: number
  /** Upper left corner of the label. */
  at: ScreenPoint
  align: 'left' | 'right' | 'center'
}

/** Left, right, above and below the mark, as horizontal and vertical sides, and how much further away than the gap. */
const candidates: [number, number, number][] = [
  [-1, 0, 0], [1, 0, 0], [-1, -1, 0], [1, -1, 0], [-1, 1, 0], [1, 1, 0], [0, -1, 0], [0, 1, 0], [-1, 0, 28], [1, 0, 28],
]

/**
 * The place of a label beside its mark that covers the fewest of the given places and stays in the frame. The place chosen last is kept
 * until another one is clearly better, so that the label does not hop while the mark is dragged.
 */
export function placeLabel(
  mark: ScreenPoint, size: { width: number, height: number }, gap: number, taken: readonly ScreenPoint[],
  frame: { width: number, height: number }, previous: number | null,
): Placement {
  const scored = candidates.map(([across, down, further], index) => {
    const x = mark.x - size.width / 2 + across * (size.width / 2 + gap + further)
    const y = mark.y - size.height / 2 + down * (size.height / 2 + gap * (across === 0 ? 1 : 0.8))
    const covered = taken.filter(({ x: tx, y: ty }) => tx > x - 4 && tx < x + size.width + 4 && ty > y - 4 && ty < y + size.height + 4).length
    const outside = Math.max(0, -x) + Math.max(0, x + size.width - frame.width) + Math.max(0, -y) + Math.max(0, y + size.height - frame.height)
    const cost = covered * 10 + outside * 20 + index - (index === previous ? 25 : 0)
    return { index, at: { x, y }, align: across < 0 ? 'right' as const : across > 0 ? 'left' as const : 'center' as const, cost }
  })
  const { index, at, align } = scored.reduce((best, candidate) => candidate.cost < best.cost ? candidate : best)
  return { index, at, align }
}

/** Places along a segment, a few pixels apart, for `placeLabel` to keep clear of; only those near `mark` matter. */
export function placesAlong(a: ScreenPoint, b: ScreenPoint, mark: ScreenPoint, near: number, spacing = 8): ScreenPoint[] {
  const piece = clipSegment(a, b, { left: mark.x - near, right: mark.x + near, top: mark.y - near, bottom: mark.y + near })
  if (!piece) return []
  const [from, to] = piece
  const count = Math.max(1, Math.ceil(Math.hypot(to.x - from.x, to.y - from.y) / spacing))
  return Array.from({ length: count + 1 }, (_, n) => ({ x: from.x + (to.x - from.x) * n / count, y: from.y + (to.y - from.y) * n / count }))
}

export interface AlongPlacement {
  /** Middle of the words on the edge itself. */
  middle: ScreenPoint
  /** To turn the words by, in radians, so that they never stand on their head. */
  angle: number
  /** Offset of the words' middle line from the edge, after turning. */
  offset: number
  /** How many of the taken places the words cover all the same. */
  covered: number
}

/**
 * The place of words along an edge where they cover the fewest of the given places, as near as possible to the end they prefer; null when the edge
 * is too short for them. `right` puts them on the right-hand side seen from the inner end.
 */
export function placeAlong(
  [inner, outer]: readonly [ScreenPoint, ScreenPoint], width: number, right: boolean, prefer: 'inner' | 'outer', taken: readonly ScreenPoint[],
): AlongPlacement | null {
  const length = Math.hypot(outer.x - inner.x, outer.y - inner.y)
  const pad = 16
  const room = length - width - 2 * pad
  if (room < 0) return null
  const unit = { x: (outer.x - inner.x) / length, y: (outer.y - inner.y) / length }
  const side = right ? 1 : -1
  const flipped = unit.x < -1e-9
  const count = Math.max(1, Math.ceil(room / 16))
  let best: { along: number, covered: number, cost: number } | null = null
  for (let n = 0; n <= count; n++) {
    const from = prefer === 'inner' ? n : count - n
    const along = pad + width / 2 + room * from / count
    const covered = taken.filter(({ x, y }) => {
      const dx = x - inner.x
      const dy = y - inner.y
      const across = side * (dy * unit.x - dx * unit.y)
      return Math.abs(dx * unit.x + dy * unit.y - along) < width / 2 + 6 && across > 2 && across < 22
    }).length
    const cost = covered + 0.05 * n
    if (!best || cost < best.cost) best = { along, covered, cost }
  }
  const { along, covered } = best!
  return {
    middle: { x: inner.x + along * unit.x, y: inner.y + along * unit.y },
    angle: Math.atan2(unit.y, unit.x) + (flipped ? Math.PI : 0),
    offset: (flipped ? -side : side) * 12,
    covered,
  }
}
