import fc from 'fast-check'

/**
 * Holds a property to so many examples. The seed is fixed, so that a run can be repeated; a failure tells the smallest counterexample that fast-check
 * finds from there.
 */
export function holds<T extends unknown[]>(seed: number, runs: number, arbitraries: { [K in keyof T]: fc.Arbitrary<T[K]> }, check: (...values: T) => void): void {
  fc.assert(fc.property(fc.tuple<T>(...arbitraries), (values) => {
    check(...values)
  }), { seed, numRuns: runs, maxSkipsPerRun: 50 })
}
