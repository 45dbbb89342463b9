// SIP distortion: polynomials in pixels that shift a pixel before the linear part. Source: D. Shupe et al. 2005, ASP Conf. Ser.
// 347, 491, equations 1-3.

export interface Sip {
  /** [power of u, power of v, coefficient] for the shift in x and in y. */
  x: readonly (readonly [number, number, number])[]
  y: readonly (readonly [number, number, number])[]
}

/** Shift of the pixel (u, v), counted from the reference pixel. */
export function sipShift(sip: Sip, u: number, v: number): [number, number] {
  const sum = (terms: Sip['x']) => terms.reduce((total, [p, q, factor]) => total + factor * u ** p * v ** q, 0)
  return [sum(sip.x), sum(sip.y)]
}

/**
 * The pixel whose shifted place is (u, v), by repeated substitution; the AP and BP polynomials are approximations and not used.
 * NaN when it does not settle to 1e-9 pixel in 50 steps, which means a distortion far beyond a real one.
 */
export function undoSip(sip: Sip, u: number, v: number): [number, number] {
  let [x, y] = [u, v]
  for (let step = 0; step < 50; step++) {
    const [dx, dy] = sipShift(sip, x, y)
    const [nextX, nextY] = [u - dx, v - dy]
    const moved = Math.max(Math.abs(nextX - x), Math.abs(nextY - y))
    x = nextX
    y = nextY
    if (moved < 1e-9) return [x, y]
  }
  return [NaN, NaN]
}
