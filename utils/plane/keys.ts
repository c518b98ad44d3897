import { dampingRatioOf, pointFromDamping } from '#shared/control/design-point'
import { abs, type Complex } from '#shared/numerics/complex'
import { niceStep } from '~/utils/nice-step'

export type Command =
  | { do: 'along' | 'across', direction: 1 | -1, fine: boolean }
  | { do: 'meeting', direction: 1 | -1 }
  | { do: 'zoom', factor: number }
  | { do: 'fit' | 'centre' | 'cancel' | 'pin' }

export interface KeyPress {
  key: string
  shiftKey: boolean
  ctrlKey: boolean
  metaKey: boolean
  altKey: boolean
}

export const zoomFactor = 1.25

/** What a key asks of the plane; null for keys that belong to the page or the browser. */
export function commandOf({ key, shiftKey, ctrlKey, metaKey, altKey }: KeyPress): Command | null {
  if (ctrlKey || metaKey || altKey) return null
  switch (key) {
    case 'ArrowUp': return { do: 'along', direction: 1, fine: shiftKey }
    case 'ArrowDown': return { do: 'along', direction: -1, fine: shiftKey }
    case 'ArrowLeft': return { do: 'across', direction: 1, fine: shiftKey }
    case 'ArrowRight': return { do: 'across', direction: -1, fine: shiftKey }
    case '+':
    case '=': return { do: 'zoom', factor: zoomFactor }
    case '-':
    case '_': return { do: 'zoom', factor: 1 / zoomFactor }
    case 'Escape': return { do: 'cancel' }
    case 'Enter': return { do: 'pin' }
  }
  switch (key.toLowerCase()) {
    case 'f': return { do: 'fit' }
    case 'c': return { do: 'centre' }
    case 'n': return { do: 'meeting', direction: 1 }
    case 'p': return { do: 'meeting', direction: -1 }
    default: return null
  }
}

/**
 * One key step along the ray: a round amount near 2 % of the natural frequency (fine: a tenth of it), landing on its multiples. The origin lies on
 * every ray and has no size to step by: a point there stays.
 */
export function stepAlong(point: Complex, direction: 1 | -1, fine: boolean): Complex {
  const frequency = abs(point)
  if (frequency === 0) return point
  const step = niceStep(frequency / 100) / (fine ? 10 : 1)
  const target = nextMultiple(frequency, step, direction)
  // Scaling keeps the very ray that the point lies on.
  const factor = (target > 0 ? target : frequency / 2) / frequency
  return { re: point.re * factor, im: point.im * factor }
}

/** One key step in damping ratio: 0.01 (fine: 0.001), landing on its multiples; the natural frequency stays. */
export function stepAcross(point: Complex, direction: 1 | -1, fine: boolean): Complex {
  const target = nextMultiple(dampingRatioOf(point), fine ? 0.001 : 0.01, direction)
  return pointFromDamping(Math.min(1, Math.max(-0.99, target)), abs(point))
}

function nextMultiple(value: number, step: number, direction: 1 | -1): number {
  const count = value / step
  // Within a millionth of a multiple counts as standing on it.
  const next = direction > 0 ? Math.floor(count + 1e-6) + 1 : Math.ceil(count - 1e-6) - 1
  return Number((next * step).toPrecision(12))
}

/** The next meeting outward (1) or inward (-1) from the design point, or null when there is none. */
export function nextMeeting(meetings: readonly Complex[], point: Complex, direction: 1 | -1): Complex | null {
  const here = abs(point)
  const further = meetings.filter(meeting => direction * (abs(meeting) - here) > 1e-7 * here)
  if (further.length === 0) return null
  return further.reduce((best, meeting) => direction * (abs(meeting) - abs(best)) < 0 ? meeting : best)
}
