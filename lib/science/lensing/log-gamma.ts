/** Lanczos coefficients for g = 7, n = 9 (C. Lanczos, SIAM J. Numer. Anal. B 1, 86 (1964); digits after P. Godfrey). */
const LANCZOS = [
  0.99999999999980993, 676.5203681218851, -1259.1392167224028, 771.32342877765313, -176.61502916214059,
  12.507343278686905, -0.13857109526572012, 9.9843695780195716e-6, 1.5056327351493116e-7,
]

/** Natural logarithm of the gamma function for x > 0, to about 1e-14 relative. */
export function logGamma(x: number): number {
  if (x < 0.5) return Math.log(Math.PI / Math.sin(Math.PI * x)) - logGamma(1 - x)
  const shifted = x - 1
  let sum = LANCZOS[0]
  for (let k = 1; k < LANCZOS.length; k++) sum += LANCZOS[k] / (shifted + k)
  const t = shifted + 7.5
  return 0.5 * Math.log(2 * Math.PI) + (shifted + 0.5) * Math.log(t) - t + Math.log(sum)
}
