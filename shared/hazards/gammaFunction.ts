/** Γ(x) by Lanczos' series with g = 5 and six terms (Lanczos 1964, SIAM J. Numer. Anal. 1); relative error below 2e-10 for x > 0. */
const series = [76.18009172947146, -86.50532032941678, 24.01409824083091, -1.231739572450155, 0.1208650973866179e-2, -0.5395239384953e-5] // prettier-ignore

/** Errors: RangeError for x not above zero. */
export function gamma(x: number): number {
  if (!(x > 0)) throw new RangeError(`gamma needs a number above zero, not ${x}`)
  const base = x + 5.5
  const sum = series.reduce((all, term, n) => all + term / (x + 1 + n), 1.000000000190015)
  return (Math.sqrt(2 * Math.PI) * sum * Math.exp((x + 0.5) * Math.log(base) - base)) / x
}
