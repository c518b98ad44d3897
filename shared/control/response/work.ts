import { TooMuchWorkError } from '../errors'

/** What is left of the pieces (of a response followed step by step) that one answer may take; a piece is that of a loop of up to eighth order. */
export interface Work { pieces: number }

/** What a piece of a loop of this order counts. */
export function weightOf(order: number): number {
  return Math.max(1, (order / 8) ** 2)
}

/** What the preparation of steps of one length counts, at this order. */
export function preparationOf(order: number): number {
  return ((order + 9) / 12) ** 3
}

/** Some tenths of a second at worst; a loop that means something takes a few hundred. */
const mostPieces = 40_000

export function fullWork(): Work {
  return { pieces: mostPieces }
}

/** @throws TooMuchWorkError, which says what may be changed about it */
export function refuseMoreWork(path?: string): never {
  throw new TooMuchWorkError('this response moves at paces too far apart to be followed from its start to its end: leave out the fastest or the slowest part of the loop', path)
}
