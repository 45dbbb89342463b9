/**
 * Percent agreement: how often two raters of the same unit say the same, without any correction for chance.
 *   pa = mean over units with r_i >= 2 of  sum over k of r_ik (r_ik - 1) / (r_i (r_i - 1))
 * Source: K. L. Gwet (2014), Handbook of Inter-Rater Reliability, 4th ed.; for two raters it is the share of units they agree on.
 */

export interface PercentAgreement {
  /** 0 to 1; null without a unit that has two ratings */
  agreement: number | null
  /** units with two or more ratings */
  units: number
}

/**
 * @param units rows are units, columns raters, null where a rater did not rate. Any values; NaN agrees with NaN.
 * Cost linear in the number of ratings. Never throws.
 */
export function percentAgreement(units: readonly (readonly (number | null)[])[]): PercentAgreement {
  let rated = 0
  let sum = 0
  for (const row of units) {
    const counts = new Map<number, number>()
    let total = 0
    for (const value of row) {
      if (value === null) continue
      counts.set(value, (counts.get(value) ?? 0) + 1)
      total += 1
    }
    if (total < 2) continue
    rated += 1
    let agreeing = 0
    for (const count of counts.values()) agreeing += count * (count - 1)
    sum += agreeing / (total * (total - 1))
  }
  return { agreement: rated > 0 ? sum / rated : null, units: rated }
}
