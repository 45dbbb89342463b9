import type { Grade } from '@/lib/science/agreement/grades'
import type { Judged } from '@/lib/work/consensus/judge'
import { gradeClass } from '@/lib/work/catalogue/grade-class'
import { inOneTurn } from './in-one-turn'

/** One thing that the release says otherwise than its grades. */
export interface Difference {
  /** Its name, or that of a file. */
  candidate: string
  what: string
  released: string
  recomputed: string
}

export type Row = Record<string, string>

/**
 * Released and recomputed numbers come from the same sums in the same order. Only the logarithm and exponential of another machine
 * may round otherwise, and the iteration carries that no further than this.
 */
const TOLERANCE = 1e-9

/** Collects what a row says otherwise. */
export class RowCheck {
  readonly differences: Difference[] = []
  constructor(
    private readonly row: Row,
    private readonly prefix = '',
  ) {}

  text(what: string, column: string, recomputed: string): void {
    const released = this.row[column] ?? ''
    if (released !== recomputed) this.add(what, released, recomputed)
  }

  number(what: string, column: string, recomputed: number | null): void {
    const released = this.row[column] ?? ''
    const agrees =
      released === '' || recomputed === null
        ? released === '' && recomputed === null
        : Math.abs(Number(released) - recomputed) <= TOLERANCE
    if (!agrees) this.add(what, released, recomputed === null ? '' : String(recomputed))
  }

  private add(what: string, released: string, recomputed: string): void {
    const inFile = this.prefix ? `${this.prefix} ${what}` : what
    this.differences.push({
      candidate: this.row.name,
      what: inFile,
      released: released || 'nothing',
      recomputed: recomputed || 'nothing',
    })
  }
}

/**
 * What a row of `catalogue.csv` says otherwise than the grades, the ruling and the place in `candidates.csv` come to. Remarks, tags, what
 * is known and what was measured are not of the grades and are not looked at.
 */
export function compareEntry(
  entry: Row,
  candidate: Row,
  { judgement }: Pick<Judged, 'judgement'>,
  votes: Readonly<Record<Grade, number>>,
): Difference[] {
  const check = new RowCheck(entry, "the catalogue's")
  const isRuled = candidate.ruling !== ''
  const rulingGrade = isRuled && candidate.ruling_grade !== '' ? (candidate.ruling_grade as 'A' | 'B' | 'C') : null
  check.text('designation', 'designation', candidate.designation)
  check.number('right ascension', 'ra', inOneTurn(Number(candidate.ra)))
  check.number('declination', 'dec', Number(candidate.dec))
  check.text('class', 'grade_class', gradeClass(rulingGrade, judgement.mean) ?? '')
  check.number('mean', 'mean_points', judgement.mean)
  check.number('spread', 'spread_points', judgement.spread)
  check.number('probability', 'probability', judgement.probability)
  check.number('grades', 'n_grades', judgement.grades)
  check.number('cannot judge', 'n_cannot_judge', judgement.cannotJudge)
  for (const grade of ['A', 'B', 'C', 'N'] as const) {
    check.number(`votes ${grade}`, `votes_${grade.toLowerCase()}`, votes[grade])
  }
  check.text('way of deciding', 'decided_by', isRuled ? 'ruling' : 'verdict')
  check.text('reason', 'reason', (isRuled && candidate.ruling_reason) || candidate.verdict_reason)
  return check.differences
}
