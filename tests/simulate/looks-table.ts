/** What the simulation reports: aims, and a table in Markdown for the README. */
import type { DesignComparison } from './compare-designs'

/** At most this share of six looks, by share of lenses, and this multiple of Wald's expected number. */
export const AIM_OF_FIXED: ReadonlyMap<number, number> = new Map([
  [0.02, 0.45],
  [0.2, 0.55],
])
export const AIM_OF_WALD = 1.25

const two = (value: number) => value.toFixed(2)
const quality = ({ completeness, purity }: { completeness: number; purity: number | null }) =>
  `${completeness.toFixed(3)}, ${purity === null ? '–' : purity.toFixed(3)}`

/** Aims that a comparison falls short of, in words. */
export function shortfalls({ scenario, ofFixed, ofWald, isMatched }: DesignComparison): string[] {
  const aim = AIM_OF_FIXED.get(scenario.lensShare)
  return [
    ...(isMatched ? [] : ['its catalogue is less complete or less pure than that of six looks']),
    ...(aim !== undefined && ofFixed > aim ? [`${two(ofFixed)} of six looks, aim ${aim}`] : []),
    ...(ofWald > AIM_OF_WALD ? [`${two(ofWald)} times Wald's number, aim ${AIM_OF_WALD}`] : []),
  ]
}

export function looksTable(comparisons: readonly DesignComparison[]): string {
  const head = [
    'lenses',
    'graders',
    'six looks: completeness, purity',
    'Ringside: completeness, purity',
    'looks',
    'of six',
    'with calibration',
    "of Wald's number",
    'seed',
  ]
  const rows = comparisons.map((one) => {
    const { scenario, fixed, product, ofFixed, ofFixedWithCalibration, ofWald } = one
    return [
      `${Math.round(100 * scenario.lensShare)} %`,
      scenario.pool,
      quality(fixed),
      quality(product),
      two(product.looksPerCandidate),
      two(ofFixed),
      two(ofFixedWithCalibration),
      two(ofWald),
      String(scenario.seed),
    ]
  })
  return [head, head.map(() => '---'), ...rows].map((cells) => `| ${cells.join(' | ')} |`).join('\n')
}
