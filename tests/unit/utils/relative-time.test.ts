import { describe, expect, it } from 'vitest'
import { relativeTime } from '~/utils/relative-time'

const now = Date.parse('2026-03-01T12:00:00Z')
const second = 1000
const minute = 60 * second
const hour = 60 * minute
const day = 24 * hour

describe('an instant as people say it', () => {
  it.each([
    [0, 'just now'],
    [-59 * second, 'just now'],
    [-20 * minute, '20 min ago'],
    [-3 * hour, '3 h ago'],
    [-1 * day, '1 day ago'],
    [-6 * day, '6 days ago'],
    [5 * minute, 'in 5 min'],
    [7 * day, 'in 7 days'],
    [-40 * day, '2026-01-20'],
    [40 * day, '2026-04-10'],
  ])('%d ms away is "%s"', (distance, words) => {
    expect(relativeTime(now + distance, now)).toBe(words)
  })

  it('takes a server’s clock that is a little fast for "just now"', () => {
    expect(relativeTime(now + second, now)).toBe('just now')
    expect(relativeTime(now + 59 * second, now)).toBe('just now')
  })
})
