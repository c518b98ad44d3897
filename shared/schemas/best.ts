import { z } from 'zod'
import type { BestPoint, Candidate } from '../control/best-point/types'
import { solveBodySchema } from './design'

/** The body of a solve, and the room to search. */
export const bestBodySchema = solveBodySchema.safeExtend({ over: z.enum(['ray', 'plane']) })

export type BestBody = z.infer<typeof bestBodySchema>

/** What the answer consists of, one a line: progress, and at the end the result or what went wrong. */
export type BestLine =
  | { progress: number, evaluations: number, best: Pick<Candidate, 'designPoint' | 'settlingTime'> | null }
  | { result: BestPoint }
  | { error: { message: string } }
