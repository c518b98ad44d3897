const minute = 60_000
const hour = 60 * minute
const day = 24 * hour

/** "just now", "20 min ago", "in 3 days"; a date once it is more than a month away. Clocks differ: the next minute is "just now" as well. */
export function relativeTime(at: number, now: number): string {
  const distance = Math.abs(at - now)
  const phrase = (text: string) => at > now ? `in ${text}` : `${text} ago`
  if (distance < minute) return 'just now'
  if (distance < hour) return phrase(`${Math.floor(distance / minute)} min`)
  if (distance < day) return phrase(`${Math.floor(distance / hour)} h`)
  if (distance < 31 * day) return phrase(count(Math.round(distance / day), 'day'))
  return new Date(at).toISOString().slice(0, 10)
}

function count(number: number, unit: string): string {
  return `${number} ${unit}${number === 1 ? '' : 's'}`
}
