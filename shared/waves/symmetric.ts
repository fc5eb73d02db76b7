/** Small real symmetric positive definite systems (row by row). */

/** Inverse by Cholesky's factor; null where the matrix is not positive definite. */
export function invertSymmetric(n: number, matrix: ArrayLike<number>): Float64Array | null {
  const lower = new Float64Array(n * n)
  for (let row = 0; row < n; row++) {
    for (let col = 0; col <= row; col++) {
      let sum = matrix[row * n + col]
      for (let k = 0; k < col; k++) sum -= lower[row * n + k] * lower[col * n + k]
      if (row === col) {
        if (!(sum > 0)) return null
        lower[row * n + row] = Math.sqrt(sum)
      } else lower[row * n + col] = sum / lower[col * n + col]
    }
  }
  const inverse = new Float64Array(n * n)
  const column = new Float64Array(n)
  for (let unit = 0; unit < n; unit++) {
    for (let row = 0; row < n; row++) {
      let sum = row === unit ? 1 : 0
      for (let k = 0; k < row; k++) sum -= lower[row * n + k] * column[k]
      column[row] = sum / lower[row * n + row]
    }
    for (let row = n - 1; row >= 0; row--) {
      let sum = column[row]
      for (let k = row + 1; k < n; k++) sum -= lower[k * n + row] * column[k]
      column[row] = sum / lower[row * n + row]
    }
    for (let row = 0; row < n; row++) inverse[row * n + unit] = column[row]
  }
  return inverse
}

/** Matrix (n × n, row by row) times vector. */
export function times(n: number, matrix: ArrayLike<number>, vector: ArrayLike<number>): Float64Array {
  const answer = new Float64Array(n)
  for (let row = 0; row < n; row++) for (let col = 0; col < n; col++) answer[row] += matrix[row * n + col] * vector[col]
  return answer
}
