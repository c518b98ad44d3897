import { abs, distance, type Complex } from '#shared/numerics/complex'

export interface Mark {
  point: Complex
  /** How many coincide. */
  multiplicity: number
}

/** Coinciding poles or zeros as one mark each. A computed m-fold root is a cluster, so "coinciding" is loose: 1e-5 of the size. */
export function gatherMarks(points: readonly Complex[]): Mark[] {
  const marks: Mark[] = []
  for (const point of points) {
    const same = marks.find(mark => distance(mark.point, point) <= 1e-5 * Math.max(abs(mark.point), abs(point)))
    if (same) same.multiplicity += 1
    else marks.push({ point, multiplicity: 1 })
  }
  return marks
}
