import type { Complex } from './complex'

/** Iterations for one eigenvalue before the search is given up; ten are common. */
const mostIterations = 60
const unitRoundoff = 2 ** -52

/**
 * All eigenvalues of a real square matrix of size n: balanced, reduced to Hessenberg form, then the double-shift QR iteration. Conjugate pairs are
 * exact mirror images, the upper one first.
 *
 * Source: J. G. F. Francis, "The QR transformation" (1961, 1962); R. S. Martin, G. Peters, J. H. Wilkinson, "The QR algorithm for real Hessenberg
 * matrices", Numer. Math. 14 (1970); balancing after B. N. Parlett, C. Reinsch (1969).
 * @param a n*n entries, row after row; left untouched
 * @throws RangeError for entries that are not finite and where the iteration does not settle
 */
export function eigenvalues(a: Float64Array, n: number): Complex[] {
  if (!a.every(Number.isFinite)) throw new RangeError('the entries of a matrix must be finite numbers')
  const h = a.slice()
  balance(h, n)
  toHessenberg(h, n)
  return iterate(h, n)
}

/** A similarity by powers of two that makes rows and columns of like size: exact. */
function balance(h: Float64Array, n: number): void {
  for (let settled = false; !settled;) {
    settled = true
    for (let i = 0; i < n; i++) {
      let row = 0
      let column = 0
      for (let j = 0; j < n; j++) {
        if (j === i) continue
        row += Math.abs(h[i * n + j]!)
        column += Math.abs(h[j * n + i]!)
      }
      if (row === 0 || column === 0) continue
      const factor = 2 ** Math.round(Math.log2(row / column) / 2)
      if (!(column * factor + row / factor < 0.95 * (column + row))) continue
      settled = false
      for (let j = 0; j < n; j++) h[i * n + j]! /= factor
      for (let j = 0; j < n; j++) h[j * n + i]! *= factor
    }
  }
}

/**
 * Householder reflections that leave zeros below the first subdiagonal; the matrix is overwritten.
 * @param vectors rows or columns that are brought to the same coordinates
 */
export function toHessenberg(h: Float64Array, n: number, vectors: readonly Float64Array[] = []): void {
  const v = new Float64Array(n)
  for (let k = 0; k < n - 2; k++) {
    let size = 0
    for (let i = k + 1; i < n; i++) size = Math.hypot(size, h[i * n + k]!)
    if (size === 0) continue
    const first = h[(k + 1) * n + k]!
    const alpha = first > 0 ? -size : size
    v.fill(0)
    v[k + 1] = first - alpha
    for (let i = k + 2; i < n; i++) v[i] = h[i * n + k]!
    let square = 0
    for (let i = k + 1; i < n; i++) square += v[i]! * v[i]!
    if (square === 0) continue
    const reflect = (read: (i: number) => number, write: (i: number, change: number) => void) => {
      let sum = 0
      for (let i = k + 1; i < n; i++) sum += v[i]! * read(i)
      for (let i = k + 1; i < n; i++) write(i, -2 * sum / square * v[i]!)
    }
    for (let j = 0; j < n; j++) reflect(i => h[i * n + j]!, (i, change) => { h[i * n + j]! += change })
    for (let j = 0; j < n; j++) reflect(i => h[j * n + i]!, (i, change) => { h[j * n + i]! += change })
    for (const vector of vectors) reflect(i => vector[i]!, (i, change) => { vector[i]! += change })
    for (let i = k + 2; i < n; i++) h[i * n + k] = 0
  }
}

function iterate(h: Float64Array, n: number): Complex[] {
  const found: Complex[] = []
  let size = 0
  for (let i = 0; i < n; i++) for (let j = Math.max(0, i - 1); j < n; j++) size += Math.abs(h[i * n + j]!)
  let shifted = 0
  let last = n - 1
  let rounds = 0
  while (last >= 0) {
    const first = activeStart(h, n, last, size)
    if (first === last) {
      found.push({ re: h[last * n + last]! + shifted, im: 0 })
      last -= 1
      rounds = 0
    }
    else if (first === last - 1) {
      found.push(...pairOf(h, n, last, shifted))
      last -= 2
      rounds = 0
    }
    else {
      if (rounds === mostIterations) throw new RangeError('the eigenvalues of the matrix do not settle')
      if (rounds > 0 && rounds % 10 === 0) shifted += exceptionalShift(h, n, last)
      rounds += 1
      sweep(h, n, first, last, rounds % 10 === 1 && rounds > 1)
    }
  }
  return found
}

/** Row from which no subdiagonal entry up to `last` is negligible. */
function activeStart(h: Float64Array, n: number, last: number, size: number): number {
  for (let l = last; l > 0; l--) {
    const sum = Math.abs(h[(l - 1) * n + l - 1]!) + Math.abs(h[l * n + l]!)
    if (Math.abs(h[l * n + l - 1]!) <= unitRoundoff * (sum === 0 ? size : sum)) {
      h[l * n + l - 1] = 0
      return l
    }
  }
  return 0
}

function pairOf(h: Float64Array, n: number, last: number, shifted: number): Complex[] {
  const x = h[last * n + last]!
  const y = h[(last - 1) * n + last - 1]!
  const product = h[last * n + last - 1]! * h[(last - 1) * n + last]!
  const half = (y - x) / 2
  const discriminant = half * half + product
  const root = Math.sqrt(Math.abs(discriminant))
  if (discriminant < 0) return [{ re: x + half + shifted, im: root }, { re: x + half + shifted, im: -root }]
  const far = half + (half < 0 ? -root : root)
  return [{ re: x + far + shifted, im: 0 }, { re: (far === 0 ? x : x - product / far) + shifted, im: 0 }]
}

/** Breaks a cycle of the iteration: the whole matrix is shifted, which the eigenvalues found later take back. */
function exceptionalShift(h: Float64Array, n: number, last: number): number {
  const shift = h[last * n + last]!
  for (let i = 0; i <= last; i++) h[i * n + i]! -= shift
  return shift
}

/** One implicit double-shift step on rows first..last. */
function sweep(h: Float64Array, n: number, first: number, last: number, exceptional: boolean): void {
  const at = (i: number, j: number) => h[i * n + j]!
  let x = at(last, last)
  let y = at(last - 1, last - 1)
  let w = at(last, last - 1) * at(last - 1, last)
  if (exceptional) {
    const s = Math.abs(at(last, last - 1)) + Math.abs(at(last - 1, last - 2))
    x = y = 0.75 * s
    w = -0.4375 * s * s
  }
  let m = last - 2
  let p = 0
  let q = 0
  let r = 0
  for (; m >= first; m--) {
    const z = at(m, m)
    const a = x - z
    const b = y - z
    p = (a * b - w) / at(m + 1, m) + at(m, m + 1)
    q = at(m + 1, m + 1) - z - a - b
    r = at(m + 2, m + 1)
    const s = Math.abs(p) + Math.abs(q) + Math.abs(r)
    p /= s
    q /= s
    r /= s
    if (m === first) break
    const left = Math.abs(at(m, m - 1)) * (Math.abs(q) + Math.abs(r))
    const right = Math.abs(p) * (Math.abs(at(m - 1, m - 1)) + Math.abs(z) + Math.abs(at(m + 1, m + 1)))
    if (left <= unitRoundoff * right) break
  }
  for (let i = m + 2; i <= last; i++) {
    h[i * n + i - 2] = 0
    if (i > m + 2) h[i * n + i - 3] = 0
  }
  for (let k = m; k < last; k++) {
    const three = k < last - 1
    if (k > m) {
      p = at(k, k - 1)
      q = at(k + 1, k - 1)
      r = three ? at(k + 2, k - 1) : 0
      x = Math.abs(p) + Math.abs(q) + Math.abs(r)
      if (x === 0) continue
      p /= x
      q /= x
      r /= x
    }
    const s = (p < 0 ? -1 : 1) * Math.sqrt(p * p + q * q + r * r)
    if (s === 0) continue
    if (k > m) h[k * n + k - 1] = -s * x
    else if (first !== m) h[k * n + k - 1] = -at(k, k - 1)
    p += s
    x = p / s
    y = q / s
    const z = r / s
    q /= p
    r /= p
    for (let j = k; j < n; j++) {
      const sum = at(k, j) + q * at(k + 1, j) + (three ? r * at(k + 2, j) : 0)
      h[k * n + j]! -= sum * x
      h[(k + 1) * n + j]! -= sum * y
      if (three) h[(k + 2) * n + j]! -= sum * z
    }
    for (let i = 0; i <= Math.min(last, k + 3); i++) {
      const sum = x * at(i, k) + y * at(i, k + 1) + (three ? z * at(i, k + 2) : 0)
      h[i * n + k]! -= sum
      h[i * n + k + 1]! -= sum * q
      if (three) h[i * n + k + 2]! -= sum * r
    }
  }
}
