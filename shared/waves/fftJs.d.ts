/** The part of fft.js that is used: transforms of a power of two, results as interleaved real and imaginary parts. */
declare module 'fft.js' {
  export default class FFT {
    constructor(size: number)
    readonly size: number
    realTransform(out: Float64Array, input: Float64Array): void
    transform(out: Float64Array, input: Float64Array): void
    inverseTransform(out: Float64Array, input: Float64Array): void
  }
}
