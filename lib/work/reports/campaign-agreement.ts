import 'server-only'
import { setImmediate as nextTurn } from 'node:timers/promises'
import { bootstrapInterval, patternsOf, type Patterns } from '@/lib/science/agreement/bootstrap'
import { fleissKappa } from '@/lib/science/agreement/fleiss-kappa'
import { groupByCandidate } from '@/lib/science/agreement/grade-table'
import { gwetAc } from '@/lib/science/agreement/gwet-ac'
import { krippendorffAlphaFromCounts } from '@/lib/science/agreement/krippendorff-alpha'
import type { GradeSheet } from './grade-sheet'
import type { CampaignAgreement, Coefficient } from './report-types'
import { searchGrades } from './search-grades'

const SEED = 20261205
/** Points of the columns that `countsOf` makes. */
const POINTS = [0, 1, 2, 3]
/** Patterns times resamples of one coefficient: about a tenth of a second. */
const MOST_WORK = 400_000

interface Measure {
  key: Coefficient['key']
  name: string
  of: (patterns: Patterns, times: ArrayLike<number>) => { value: number | null; over: string; reason: string | null }
}

const units = (number: number) => `${number.toLocaleString('en')} candidates with two grades or more`

const MEASURES: Measure[] = [
  {
    key: 'alpha',
    name: 'Krippendorff’s alpha, ordinal',
    of: ({ counts }, times) => {
      const { alpha, reason, pairableUnits } = krippendorffAlphaFromCounts(counts, POINTS, 'ordinal', times)
      return { value: alpha, over: units(pairableUnits), reason }
    },
  },
  {
    key: 'kappa',
    name: 'Fleiss’ kappa, for unequal numbers of grades',
    of: ({ counts }, times) => {
      const { kappa, reason, subjects } = fleissKappa(counts, times)
      return { value: kappa, over: units(subjects), reason }
    },
  },
  {
    key: 'ac1',
    name: 'Gwet’s AC1',
    of: ({ counts }, times) => {
      const { ac, reason, units: rated } = gwetAc(counts, 'identity', times)
      return { value: ac, over: units(rated), reason }
    },
  },
  {
    key: 'ac2',
    name: 'Gwet’s AC2, quadratic weights',
    of: ({ counts }, times) => {
      const { ac, reason, units: rated } = gwetAc(counts, 'quadratic', times)
      return { value: ac, over: units(rated), reason }
    },
  },
]

/**
 * Agreement of all who count, over the candidates of the search, each coefficient with its 95 % bootstrap interval over
 * candidates. Fleiss' kappa is here in the form for unequal numbers, over every candidate; a run's summary has his own, over the
 * largest group with equally many.
 */
export async function measureCampaign(sheet: GradeSheet, isOut: readonly boolean[]): Promise<CampaignAgreement> {
  const patterns = patternsOf(countsOf(sheet, isOut))
  const resamples = Math.max(200, Math.min(1000, Math.floor(MOST_WORK / Math.max(1, patterns.counts.length))))
  const coefficients: Coefficient[] = []
  for (const measure of MEASURES) {
    await nextTurn()
    const { value, over, reason } = measure.of(patterns, patterns.multiplicity)
    const interval =
      value === null
        ? null
        : bootstrapInterval(patterns.multiplicity, (times) => measure.of(patterns, times).value, {
            seed: SEED,
            resamples,
          })
    coefficients.push({
      key: measure.key,
      name: measure.name,
      value,
      interval: interval && { low: interval.low, high: interval.high },
      note: value === null ? (reason ?? 'Not to be computed.') : `Over ${over}.`,
    })
  }
  const { observed, units: candidates } = gwetAc(patterns.counts, 'identity', patterns.multiplicity)
  return { coefficients, percentAgreement: observed, candidates, resamples }
}

/** A row a candidate that has a grade: how many gave 0, 1, 2 and 3 points. */
function* countsOf(sheet: GradeSheet, isOut: readonly boolean[]): Generator<Uint16Array> {
  const { start, cell, candidates } = groupByCandidate(searchGrades(sheet, isOut))
  for (let candidate = 0; candidate < candidates; candidate++) {
    if (start[candidate] === start[candidate + 1]) continue
    const row = new Uint16Array(POINTS.length)
    for (let entry = start[candidate]; entry < start[candidate + 1]; entry++) row[3 - (cell[entry] % 4)] += 1
    yield row
  }
}
