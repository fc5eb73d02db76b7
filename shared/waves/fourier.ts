/** Plans and work space of the fast Fourier transform, made once for each size. X(f) = Σ x(t) exp(−i 2π f t). */
import FFT from 'fft.js'

export interface FourierPlan {
  size: number
  /** Real input, zero-padded by whoever fills it. */
  input: Float64Array
  /** Interleaved real and imaginary parts; only the first size/2 + 1 bins are filled. */
  output: Float64Array
  run: () => void
}

const plans = new Map<number, FourierPlan>()

/** The plan for a power of two. The arrays are shared: fill, run and read before the next use. */
export function fourierPlan(size: number): FourierPlan {
  const known = plans.get(size)
  if (known) return known
  const fft = new FFT(size)
  const input = new Float64Array(size)
  const output = new Float64Array(2 * size)
  const plan = { size, input, output, run: () => fft.realTransform(output, input) }
  plans.set(size, plan)
  return plan
}

/** Real series x(t) = Re Σ_k c_k exp(i 2π k t / size) of one-sided coefficients c (interleaved, from bin `first` on). */
export function realSeries(size: number, first: number, coefficients: Float64Array): Float64Array {
  const known = inverses.get(size)
  const fft = known ?? new FFT(size)
  if (!known) inverses.set(size, fft)
  const input = new Float64Array(2 * size)
  input.set(coefficients, 2 * first)
  const output = new Float64Array(2 * size)
  fft.inverseTransform(output, input)
  return Float64Array.from({ length: size }, (_, n) => output[2 * n] * size)
}

const inverses = new Map<number, FFT>()

/** Smallest power of two not below n, at least 2. */
export function powerOfTwoFrom(n: number): number {
  let size = 2
  while (size < n) size *= 2
  return size
}
