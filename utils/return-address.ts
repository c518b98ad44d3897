const returnable = [/^\/scenarios(\/[A-Za-z0-9_-]{1,40})?$/, /^\/s\/[A-Za-z0-9_-]{21,64}$/]

/** Where to go after signing in: one of our own pages, never an address made up by whoever wrote the link. */
export function returnAddress(wanted: unknown, otherwise = '/scenarios'): string {
  return typeof wanted === 'string' && returnable.some(pattern => pattern.test(wanted)) ? wanted : otherwise
}
