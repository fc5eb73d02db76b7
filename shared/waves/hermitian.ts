/** Small Hermitian matrices as two real arrays (real and imaginary parts, row by row), without allocation. */

/**
 * Inverse and logarithm of the determinant of a positive definite Hermitian matrix by Cholesky's factor. Writes the inverse
 * into `outReal`, `outImag`; `work` holds 4·n² numbers. Returns ln det, NaN where the matrix is not positive definite.
 */
export function invertHermitian(
  n: number,
  real: Float64Array,
  imag: Float64Array,
  outReal: Float64Array,
  outImag: Float64Array,
  work: Float64Array,
): number {
  const nn = n * n
  const lr = 0
  const li = nn
  const ir = 2 * nn
  const ii = 3 * nn
  let logDeterminant = 0
  for (let row = 0; row < n; row++) {
    for (let col = 0; col <= row; col++) {
      let sr = real[row * n + col]
      let si = imag[row * n + col]
      for (let k = 0; k < col; k++) {
        const ar = work[lr + row * n + k]
        const ai = work[li + row * n + k]
        const br = work[lr + col * n + k]
        const bi = work[li + col * n + k]
        sr -= ar * br + ai * bi
        si -= ai * br - ar * bi
      }
      if (row === col) {
        if (!(sr > 0)) return NaN
        logDeterminant += Math.log(sr)
        work[lr + row * n + row] = Math.sqrt(sr)
      } else {
        const pivot = work[lr + col * n + col]
        work[lr + row * n + col] = sr / pivot
        work[li + row * n + col] = si / pivot
      }
    }
  }
  // Inverse of the lower factor, column by column.
  for (let col = 0; col < n; col++) {
    for (let row = col; row < n; row++) {
      let sr = row === col ? 1 : 0
      let si = 0
      for (let k = col; k < row; k++) {
        const ar = work[lr + row * n + k]
        const ai = work[li + row * n + k]
        const br = work[ir + k * n + col]
        const bi = work[ii + k * n + col]
        sr -= ar * br - ai * bi
        si -= ar * bi + ai * br
      }
      const pivot = work[lr + row * n + row]
      work[ir + row * n + col] = sr / pivot
      work[ii + row * n + col] = si / pivot
    }
  }
  for (let row = 0; row < n; row++) {
    for (let col = 0; col <= row; col++) {
      let sr = 0
      let si = 0
      for (let k = row; k < n; k++) {
        const ar = work[ir + k * n + row]
        const ai = -work[ii + k * n + row]
        const br = work[ir + k * n + col]
        const bi = work[ii + k * n + col]
        sr += ar * br - ai * bi
        si += ar * bi + ai * br
      }
      outReal[row * n + col] = sr
      outImag[row * n + col] = si
      outReal[col * n + row] = sr
      outImag[col * n + row] = -si
    }
  }
  return logDeterminant
}
