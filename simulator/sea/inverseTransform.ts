/**
 * Real series from one-sided spectra, two series a transform: x(n) = Re Σ A(k) exp(i 2π k n / N).
 * Radix-2 after Cooley & Tukey 1965.
 */
export interface OneSidedSpectrum {
  real: Float64Array
  imaginary: Float64Array
}

/** `length` is a power of two; each spectrum has at most length / 2 coefficients. Any number of spectra. */
export function realSeries(spectra: OneSidedSpectrum[], length: number): Float64Array[] {
  const series: Float64Array[] = []
  for (let index = 0; index < spectra.length; index += 2) {
    const [first, second] = transformTwo(spectra[index], spectra[index + 1], length)
    series.push(first)
    if (index + 1 < spectra.length) series.push(second)
  }
  return series
}

/** With Hermitian halves of both in one complex spectrum, the first comes out as real, the second as imaginary part. */
function transformTwo(a: OneSidedSpectrum, b: OneSidedSpectrum | undefined, length: number) {
  const real = new Float64Array(length)
  const imaginary = new Float64Array(length)
  for (let k = 1; k < Math.min(a.real.length, length / 2); k++) {
    const bReal = b ? b.real[k] : 0
    const bImaginary = b ? b.imaginary[k] : 0
    real[k] = (a.real[k] - bImaginary) / 2
    imaginary[k] = (a.imaginary[k] + bReal) / 2
    real[length - k] = (a.real[k] + bImaginary) / 2
    imaginary[length - k] = (bReal - a.imaginary[k]) / 2
  }
  inverseInPlace(real, imaginary)
  return [real, imaginary] as const
}

function inverseInPlace(real: Float64Array, imaginary: Float64Array): void {
  const length = real.length
  if (length & (length - 1)) throw new RangeError(`a transform of ${length} samples: the length must be a power of two`)
  swapToBitReversedOrder(real, imaginary)
  const cosines = new Float64Array(length / 2)
  const sines = new Float64Array(length / 2)
  for (let k = 0; k < length / 2; k++) {
    cosines[k] = Math.cos((2 * Math.PI * k) / length)
    sines[k] = Math.sin((2 * Math.PI * k) / length)
  }
  for (let half = 1; half < length; half *= 2) {
    const stride = length / (2 * half)
    for (let start = 0; start < length; start += 2 * half) {
      for (let k = 0; k < half; k++) {
        const upper = start + k
        const lower = upper + half
        const c = cosines[k * stride]
        const s = sines[k * stride]
        const re = real[lower] * c - imaginary[lower] * s
        const im = real[lower] * s + imaginary[lower] * c
        real[lower] = real[upper] - re
        imaginary[lower] = imaginary[upper] - im
        real[upper] += re
        imaginary[upper] += im
      }
    }
  }
}

function swapToBitReversedOrder(real: Float64Array, imaginary: Float64Array): void {
  const length = real.length
  for (let index = 1, reversed = 0; index < length; index++) {
    let bit = length >> 1
    for (; reversed & bit; bit >>= 1) reversed ^= bit
    reversed ^= bit
    if (index < reversed) {
      ;[real[index], real[reversed]] = [real[reversed], real[index]]
      ;[imaginary[index], imaginary[reversed]] = [imaginary[reversed], imaginary[index]]
    }
  }
}
