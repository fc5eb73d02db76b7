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

/** Smallest power of two not below n, at least 2. */
export function powerOfTwoFrom(n: number): number {
  let size = 2
  while (size < n) size *= 2
  return size
}
