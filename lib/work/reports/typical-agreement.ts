import type { PairAgreement } from './report-types'

export interface Nearness {
  /** mean kappa with the others, each pair counted by its shared candidates; null without a pair */
  kappa: number | null
  shared: number
}

/** How near each grader's grades are to everybody else's. Pairs without a kappa are left out. */
export function nearnessOfGraders(pairs: readonly PairAgreement[], graders: number): Nearness[] {
  const sums = Array.from({ length: graders }, () => ({ weighted: 0, shared: 0 }))
  for (const { first, second, shared, quadratic } of pairs) {
    if (quadratic === null) continue
    for (const grader of [first, second]) {
      sums[grader].weighted += shared * quadratic
      sums[grader].shared += shared
    }
  }
  return sums.map(({ weighted, shared }) => ({ kappa: shared > 0 ? weighted / shared : null, shared }))
}
