/**
 * Brightness curves y(x) from [0, 1] to [0, 1]. Each clips its input to [0, 1] first, keeps 0 and 1 fixed, rises
 * strictly, and passes NaN on. Convention and names: astropy.visualization stretches with clip=True.
 */
export type Stretch = (x: number) => number

const clip = (x: number): number => (x < 0 ? 0 : x > 1 ? 1 : x)

/** y = x */
export const linearStretch: Stretch = (x) => clip(x)

/** y = sqrt(x) */
export const sqrtStretch: Stretch = (x) => Math.sqrt(clip(x))

/** y = x^2 */
export const squaredStretch: Stretch = (x) => clip(x) ** 2

/** y = log(a x + 1) / log(a + 1), a > 0. */
export function logStretch(a = 1000): Stretch {
  requirePositive('log', a)
  const scale = Math.log(a + 1)
  return (x) => Math.log(a * clip(x) + 1) / scale
}

/** y = asinh(x / a) / asinh(1 / a), 0 < a: linear well below a, logarithmic above. */
export function asinhStretch(a = 0.1): Stretch {
  requirePositive('asinh', a)
  const scale = Math.asinh(1 / a)
  return (x) => Math.asinh(clip(x) / a) / scale
}

/** y = sinh(x / a) / sinh(1 / a), 0 < a. */
export function sinhStretch(a = 1 / 3): Stretch {
  requirePositive('sinh', a)
  const scale = Math.sinh(1 / a)
  return (x) => Math.sinh(clip(x) / a) / scale
}

function requirePositive(name: string, a: number): void {
  if (!(a > 0 && Number.isFinite(a))) {
    throw new RangeError(`The ${name} stretch needs a softening above 0, not ${a}; give a positive number.`)
  }
}
