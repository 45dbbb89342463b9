import type { RunSummary } from '@/db/schema/consensus'
import { fleissKappa, subjectsRatedBy } from '@/lib/science/agreement/fleiss-kappa'
import { GRADE_POINTS } from '@/lib/science/agreement/grades'
import { krippendorffAlphaFromCounts } from '@/lib/science/agreement/krippendorff-alpha'

const POINTS = Object.values(GRADE_POINTS).sort((a, b) => a - b)

type Agreement = Pick<RunSummary, 'alphaOrdinal' | 'alphaNote' | 'fleissKappa' | 'kappaNote'>

/**
 * Agreement of a campaign's graders, each number with a note in words on what it was computed over.
 *
 * Krippendorff's alpha (ordinal) takes every candidate with two grades or more. Fleiss (1971) defines kappa for the same
 * number of grades on each subject, so it is computed over the largest group of candidates that have equally many (of equal
 * groups the one with more grades). 'Cannot judge' is no grade and is in neither.
 * @param counts a row a candidate: how many gave 0, 1, 2 and 3 points.
 */
export function measureAgreement(counts: readonly ArrayLike<number>[]): Agreement {
  const alpha = krippendorffAlphaFromCounts(counts, POINTS, 'ordinal')
  const alphaNote =
    alpha.alpha === null
      ? alpha.reason
      : `Over ${alpha.pairableValues} grades of the ${alpha.pairableUnits} candidates that have two or more.`
  const number = commonNumberOfGrades(counts)
  if (number === null) {
    return {
      alphaOrdinal: alpha.alpha,
      alphaNote,
      fleissKappa: null,
      kappaNote: 'No candidate has two grades, so there is nothing to compare.',
    }
  }
  const group = subjectsRatedBy(counts, number)
  const kappa = fleissKappa(group)
  const graded = counts.filter((row) => total(row) > 0).length
  const over = `${group.length} of ${graded} graded candidates, those with exactly ${number} grades`
  return {
    alphaOrdinal: alpha.alpha,
    alphaNote,
    fleissKappa: kappa.kappa,
    kappaNote:
      kappa.kappa === null ? `Over ${over}: ${kappa.reason}` : `Over ${over}: it is defined for equal numbers.`,
  }
}

function total(row: ArrayLike<number>): number {
  let sum = 0
  for (let k = 0; k < row.length; k++) sum += row[k]
  return sum
}

function commonNumberOfGrades(counts: readonly ArrayLike<number>[]): number | null {
  const candidatesWith = new Map<number, number>()
  for (const row of counts) {
    const grades = total(row)
    if (grades >= 2) candidatesWith.set(grades, (candidatesWith.get(grades) ?? 0) + 1)
  }
  let best: number | null = null
  for (const [grades, candidates] of candidatesWith) {
    const most = best === null ? 0 : (candidatesWith.get(best) ?? 0)
    if (candidates > most || (candidates === most && best !== null && grades > best)) best = grades
  }
  return best
}
