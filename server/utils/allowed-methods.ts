export interface Route {
  /** Segments with a colon stand for any one segment: /api/scenarios/:id */
  route: string
  /** In lower case; absent when the route takes every method. */
  method?: string
}

/** The methods that the routes of this path take, in upper case and alphabetical order; empty when there is no such path. */
export function allowedMethods(routes: readonly Route[], path: string): string[] {
  const segments = path.split('/')
  const fits = (pattern: string[]) => pattern.length === segments.length
    && pattern.every((part, index) => part.startsWith(':') ? segments[index] !== '' : part === segments[index])
  return routes.flatMap(({ route, method }) => method !== undefined && fits(route.split('/')) ? [method.toUpperCase()] : []).sort()
}
