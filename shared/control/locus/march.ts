import { refine, smallest, type MovingRoot, type ScaledLoop } from './scaled-loop'

/** Points of one branch in scaled units, by rising gain. */
export interface Branch {
  points: { re: number, im: number, k: number }[]
}

/** A root on its way: one on the real axis, or the upper one of a pair, whose lower branch is written as the mirror image. */
export interface Mover extends MovingRoot {
  branch: Branch
  mirror: Branch | null
}

/** Longest piece of a branch, in extents of the figure (of the distance from the origin further out). */
const longestPiece = 0.04
/** Largest ratio of sideways deviation from the tangent to the length of a piece: some 7 degrees of turn between pieces. */
const sidewaysLimit = 0.06
/** Likewise along the tangent: keeps the starting points of the corrector close. */
const lengthwiseLimit = 0.5
/** A corrected root must lie within this share of the distance to its neighbours from where it was expected, so that none swap. */
const separationShare = 0.25
/** Pieces below this share of their distance from the origin are points on any screen: their curvature is of no account. */
const invisible = 1e-6
const longestStep = 1
const shortestStep = 1e-15
/** An interval that needs more is finished in one piece: what is left of it lies below the accuracy of the poles and zeros. */
const mostSteps = 1200

/** Writes the movers' present places into their branches. */
export function record(movers: Mover[], k: number): void {
  for (const { re, im, branch, mirror } of movers) {
    branch.points.push({ re, im, k })
    mirror?.points.push({ re, im: -im, k })
  }
}

/**
 * Carries all movers from one gain to another inside an interval without meetings, recording every accepted step. The step in ln k shrinks until no
 * root strays from its tangent, moves too far, or comes near another's place.
 * @returns the movers at the final gain
 */
export function march(loop: ScaledLoop, start: Mover[], from: number, to: number): Mover[] {
  let movers = start
  let k = from
  let step = 0.02
  for (let count = 0; k < to && count < mostSteps && loop.allowance.moves > 0; count++) {
    // Counted from the present gain, not as a running logarithm: close meetings leave intervals of few digits.
    const next = Math.min(k * Math.exp(step), to)
    const taken = Math.log1p((next - k) / k)
    const { arrived, strain } = advance(loop, movers, next, taken)
    if (strain > 1 && step > shortestStep) {
      step = Math.max(taken * Math.min(0.5, Math.max(0.1, 0.7 / strain)), shortestStep)
      continue
    }
    movers = arrived
    k = next
    record(movers, k)
    step = Math.max(Math.min(taken * Math.min(2.5, Math.max(0.5, 0.8 / Math.max(strain, 1e-3))), longestStep), shortestStep)
  }
  if (k < to) {
    movers = movers.map(mover => ({ ...mover, ...refine(loop, to, mover.re, mover.im, mover.mirror === null) }))
    record(movers, to)
  }
  return movers
}

/** One step; strain is the largest ratio of a measure to its limit, above 1 to be refused. */
function advance(loop: ScaledLoop, movers: Mover[], k: number, du: number): { arrived: Mover[], strain: number } {
  loop.allowance.moves -= movers.length
  let strain = 0
  const deviations: number[] = []
  const arrived = movers.map((mover): Mover => {
    const expectedRe = mover.re + mover.velocityRe * du
    const expectedIm = mover.im + mover.velocityIm * du
    const root = refine(loop, k, expectedRe, expectedIm, mover.mirror === null)
    if (root === null || (mover.mirror !== null && root.im <= 0)) {
      strain = Math.max(strain, 4)
      deviations.push(0)
      return mover
    }
    const offRe = root.re - expectedRe
    const offIm = root.im - expectedIm
    const off = Math.hypot(offRe, offIm)
    const length = Math.hypot(root.re - mover.re, root.im - mover.im)
    deviations.push(off)
    strain = Math.max(strain, length / (longestPiece * Math.max(1, Math.hypot(root.re, root.im))))
    const least = invisible * (smallest + Math.hypot(root.re, root.im))
    if (length > least || off > least) {
      const speed = Math.hypot(mover.velocityRe, mover.velocityIm)
      const sideways = speed > 0 ? Math.abs(offRe * mover.velocityIm - offIm * mover.velocityRe) / speed : off
      strain = Math.max(strain, sideways / (sidewaysLimit * length), off / (lengthwiseLimit * length))
    }
    return { ...root, branch: mover.branch, mirror: mover.mirror }
  })
  return { arrived, strain: Math.max(strain, crowding(arrived, deviations)) }
}

/** Deviations from the expected places against the distances between roots. */
function crowding(movers: Mover[], deviations: number[]): number {
  let strain = 0
  for (let i = 0; i < movers.length; i++) {
    const a = movers[i]!
    const deviation = deviations[i]!
    if (deviation === 0) continue
    let nearest = a.mirror === null ? Infinity : 2 * a.im
    for (let j = 0; j < movers.length; j++) {
      if (j === i) continue
      const x = a.re - movers[j]!.re
      const y = a.im - movers[j]!.im
      nearest = Math.min(nearest, Math.sqrt(x * x + y * y))
    }
    strain = Math.max(strain, deviation / (separationShare * nearest + 1e-300))
  }
  return strain
}
