/** Products and turns of small complex matrices, written into arrays that exist already. */
import type { ComplexMatrix } from './waveMatrices.ts'

/** out = factor · matrix. */
export function scaled(matrix: ComplexMatrix, factor: number, out: ComplexMatrix): void {
  for (let n = 0; n < matrix.real.length; n++) {
    out.real[n] = factor * matrix.real[n]
    out.imag[n] = factor * matrix.imag[n]
  }
}

/** out = a · b, m × m. */
export function multiply(m: number, a: ComplexMatrix, b: ComplexMatrix, out: ComplexMatrix): void {
  for (let row = 0; row < m; row++) {
    for (let col = 0; col < m; col++) {
      let real = 0
      let imag = 0
      for (let k = 0; k < m; k++) {
        const ar = a.real[row * m + k]
        const ai = a.imag[row * m + k]
        const br = b.real[k * m + col]
        const bi = b.imag[k * m + col]
        real += ar * br - ai * bi
        imag += ar * bi + ai * br
      }
      out.real[row * m + col] = real
      out.imag[row * m + col] = imag
    }
  }
}

/** Real part of tr(A B). */
export function traceOfProduct(m: number, a: ComplexMatrix, b: ComplexMatrix): number {
  let trace = 0
  for (let row = 0; row < m; row++) {
    for (let k = 0; k < m; k++) {
      const at = row * m + k
      const other = k * m + row
      trace += a.real[at] * b.real[other] - a.imag[at] * b.imag[other]
    }
  }
  return trace
}

/** Takes the phase `angle` of one sensor out of the data. */
export function unturn(c: ComplexMatrix, sensor: number, angle: number): void {
  if (angle === 0) return
  const m = Math.sqrt(c.real.length)
  const cos = Math.cos(angle)
  const sin = Math.sin(angle)
  for (let k = 0; k < m; k++) {
    if (k === sensor) continue
    const row = sensor * m + k
    const col = k * m + sensor
    const real = c.real[row] * cos + c.imag[row] * sin
    const imag = c.imag[row] * cos - c.real[row] * sin
    c.real[row] = real
    c.imag[row] = imag
    c.real[col] = real
    c.imag[col] = -imag
  }
}

/** ∂(D R D*)/∂v with D = exp(i v rate) on one sensor, at v = 0. */
export function turnRate(r: ComplexMatrix, sensor: number, rate: number, out: ComplexMatrix): void {
  out.real.fill(0)
  out.imag.fill(0)
  const m = Math.sqrt(r.real.length)
  for (let k = 0; k < m; k++) {
    if (k === sensor) continue
    const row = sensor * m + k
    const col = k * m + sensor
    out.real[row] = -rate * r.imag[row]
    out.imag[row] = rate * r.real[row]
    out.real[col] = out.real[row]
    out.imag[col] = -out.imag[row]
  }
}
