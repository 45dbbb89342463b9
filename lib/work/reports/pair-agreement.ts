import 'server-only'
import { setImmediate as nextTurn } from 'node:timers/promises'
import { bootstrapInterval } from '@/lib/science/agreement/bootstrap'
import { cohenKappa } from '@/lib/science/agreement/cohen-kappa'
import { groupByCandidate } from '@/lib/science/agreement/grade-table'
import type { GradeSheet } from './grade-sheet'
import type { PairAgreement } from './report-types'
import { searchGrades } from './search-grades'

/** Fewer shared candidates than this say little of a pair: greyed, and no interval is computed. Our choice, no source. */
export const LEAST_SHARED = 20
const GRADES = 4
const CELLS = GRADES * GRADES
const SEED = 20261205
const RESAMPLES = 400
/** Candidates counted before other work of the process gets its turn. */
const TURN = 20_000

/** Tables of every pair of graders, who are left out too: at pair * 16 + first's grade * 4 + second's grade. */
export interface PairTables {
  graders: number
  counts: Uint32Array
}

/** Place of a pair among all; first < second. */
function pairIndex(first: number, second: number, graders: number): number {
  return first * graders - (first * (first + 1)) / 2 + second - first - 1
}

export async function countPairs(sheet: GradeSheet): Promise<PairTables> {
  const graders = sheet.graders.length
  const table = groupByCandidate(searchGrades(sheet))
  const counts = new Uint32Array(((graders * (graders - 1)) / 2) * CELLS)
  for (let candidate = 0; candidate < table.candidates; candidate++) {
    if (candidate % TURN === TURN - 1) await nextTurn()
    const to = table.start[candidate + 1]
    for (let i = table.start[candidate]; i < to; i++) {
      for (let j = i + 1; j < to; j++) {
        // Answers stand by grader, so that the first has the lower number.
        const first = Math.floor(table.cell[i] / GRADES)
        const second = Math.floor(table.cell[j] / GRADES)
        const cell = (table.cell[i] % GRADES) * GRADES + (table.cell[j] % GRADES)
        counts[pairIndex(first, second, graders) * CELLS + cell] += 1
      }
    }
  }
  return { graders, counts }
}

/** The 4 by 4 table of a pair, rows the first's grade from A to N. */
export function tableOfPair({ graders, counts }: PairTables, first: number, second: number): number[][] {
  const from = pairIndex(first, second, graders) * CELLS
  return Array.from({ length: GRADES }, (_, row) =>
    Array.from(counts.subarray(from + row * GRADES, from + (row + 1) * GRADES)),
  )
}

/** Agreement of each pair that has shared a candidate: kappa with quadratic weights, plain kappa, share of equal grades. */
export async function measurePairs(tables: PairTables): Promise<PairAgreement[]> {
  const pairs: PairAgreement[] = []
  for (let first = 0; first < tables.graders; first++) {
    for (let second = first + 1; second < tables.graders; second++) {
      const table = tableOfPair(tables, first, second)
      const quadratic = cohenKappa(table, 'quadratic')
      if (quadratic.units === 0) continue
      pairs.push({
        first,
        second,
        shared: quadratic.units,
        quadratic: quadratic.kappa,
        quadraticInterval: quadratic.units < LEAST_SHARED ? null : quadraticInterval(table.flat()),
        plain: cohenKappa(table).kappa,
        sameGrade: quadratic.observed,
        reason: quadratic.reason,
      })
      await nextTurn()
    }
  }
  return pairs
}

function quadraticInterval(cells: readonly number[]) {
  const found = bootstrapInterval(
    cells,
    (times) =>
      cohenKappa(
        Array.from({ length: GRADES }, (_, row) => Array.from(times.subarray(row * GRADES, (row + 1) * GRADES))),
        'quadratic',
      ).kappa,
    { seed: SEED, resamples: RESAMPLES },
  )
  return found && { low: found.low, high: found.high }
}
