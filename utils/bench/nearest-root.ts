import { distance, type Complex } from '#shared/numerics/complex'

/** The root nearest to a place, or null where there are none. */
export function nearestRoot(roots: readonly Complex[], place: Complex): Complex | null {
  return roots.reduce<Complex | null>((best, root) => best === null || distance(root, place) < distance(best, place) ? root : best, null)
}
