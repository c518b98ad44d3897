import { limits } from '../schemas/limits'

/** A title with a suffix, such as " (copy)"; where both are too long together, the title gives way. */
export function suffixedTitle(title: string, suffix: string): string {
  return `${title.slice(0, limits.title - suffix.length)}${suffix}`
}
