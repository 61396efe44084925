/** L D L' of a symmetric positive definite pentadiagonal matrix; L has unit diagonal. */
export interface PentadiagonalFactor {
  readonly pivots: Float64Array
  /** below1[i] = L[i, i-1], below2[i] = L[i, i-2]; 0 where there is none. */
  readonly below1: Float64Array
  readonly below2: Float64Array
}

/**
 * Factorises in O(n).
 *
 * @param diagonal n entries; first[i] = M[i, i+1], second[i] = M[i, i+2] (entries past the end are not read)
 */
export function factorPentadiagonal(
  diagonal: Float64Array,
  first: Float64Array,
  second: Float64Array,
): PentadiagonalFactor {
  const n = diagonal.length
  const pivots = new Float64Array(n)
  const below1 = new Float64Array(n)
  const below2 = new Float64Array(n)
  for (let i = 0; i < n; i++) {
    let pivot = diagonal[i]
    if (i > 1) {
      below2[i] = second[i - 2] / pivots[i - 2]
      pivot -= below2[i] ** 2 * pivots[i - 2]
    }
    if (i > 0) {
      const cross = i > 1 ? below2[i] * pivots[i - 2] * below1[i - 1] : 0
      below1[i] = (first[i - 1] - cross) / pivots[i - 1]
      pivot -= below1[i] ** 2 * pivots[i - 1]
    }
    pivots[i] = pivot
  }
  return { pivots, below1, below2 }
}

/** Solves M x = right in place: `right` becomes x. */
export function solvePentadiagonal(factor: PentadiagonalFactor, right: Float64Array): void {
  const { pivots, below1, below2 } = factor
  const n = right.length
  for (let i = 1; i < n; i++) right[i] -= below1[i] * right[i - 1] + (i > 1 ? below2[i] * right[i - 2] : 0)
  for (let i = n - 1; i >= 0; i--) {
    right[i] /= pivots[i]
    if (i + 1 < n) right[i] -= below1[i + 1] * right[i + 1]
    if (i + 2 < n) right[i] -= below2[i + 2] * right[i + 2]
  }
}

/** Diagonal of the inverse in O(n), from the factor alone (Takahashi, Fagan & Chen 1973). */
export function inverseDiagonal({ pivots, below1, below2 }: PentadiagonalFactor): Float64Array {
  const n = pivots.length
  const inverse = new Float64Array(n)
  // Inverse entries of row i + 1: at its diagonal's right neighbour, and diagonals of rows i + 1 and i + 2.
  let next = 0
  for (let i = n - 1; i >= 0; i--) {
    const a = i + 1 < n ? below1[i + 1] : 0
    const b = i + 2 < n ? below2[i + 2] : 0
    const d1 = i + 1 < n ? inverse[i + 1] : 0
    const d2 = i + 2 < n ? inverse[i + 2] : 0
    const right1 = -a * d1 - b * next
    const right2 = -a * next - b * d2
    inverse[i] = 1 / pivots[i] - a * right1 - b * right2
    next = right1
  }
  return inverse
}
