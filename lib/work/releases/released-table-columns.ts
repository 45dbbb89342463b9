import type { RunModel } from '@/db/schema/consensus'
import { fromJson } from '@/db/schema/values'
import type { Column } from '@/lib/science/formats/columns'
import { GRADES } from '@/lib/science/agreement/grades'
import { VISUAL_CAUTION } from './cautions'
import type { ReleasedCandidate, ReleasedGrader } from './read-frozen'
import type { ReleasedAnswer } from './what-counts'

type Text<Row> = [name: string, description: string, value: (row: Row) => string | null]
type Count<Row> = [name: string, description: string, value: (row: Row) => number | null]

const text = <Row>([name, description, value]: Text<Row>): Column<Row> => ({
  name,
  datatype: 'unicodeChar',
  description,
  value,
})
const number = <Row>([name, description, value]: Count<Row>, unit?: string): Column<Row> => ({
  name,
  datatype: 'double',
  description,
  value,
  ...(unit ? { unit } : {}),
})

/** `candidates.csv`: every judged candidate, with what makes its state. */
export const CANDIDATE_COLUMNS: readonly Column<ReleasedCandidate>[] = [
  text(['name', 'Name of the candidate in its campaign, by which grades.csv refers to it', (row) => row.name]),
  text(['designation', 'Designation by the IAU rule, of confirmed candidates', (row) => row.designation]),
  number(['ra', 'Right ascension, ICRS', (row) => row.ra_deg], 'deg'),
  number(['dec', 'Declination, ICRS', (row) => row.dec_deg], 'deg'),
  text(['state', 'What it is in this release: the ruling where there is one, else the verdict', (row) => row.state]),
  text([
    'verdict',
    'What the rule makes of its grades: open, split, confirmed or set aside',
    (row) => row.verdict.outcome,
  ]),
  number(['n_grades', 'Grades that count', (row) => row.verdict.grades]),
  number(['n_cannot_judge', "Looks that count and were answered 'cannot judge'", (row) => row.verdict.cannotJudge]),
  number(['mean_points', 'Mean of the grade points: A 3, B 2, C 1, N 0', (row) => row.verdict.mean]),
  number(['spread_points', 'Population standard deviation of the grade points', (row) => row.verdict.spread]),
  number(['probability', 'Probability of a lens, by the reliability method', (row) => row.verdict.probability]),
  text(['verdict_reason', 'Reason of the verdict in words', (row) => row.verdictReason]),
  text([
    'first_pass',
    "'not sent on' where the first pass over small stamps dropped it and nobody has graded it since",
    (row) => (row.notSentOn ? 'not sent on' : null),
  ]),
  text(['ruling', "A lead's ruling, which stands over the verdict", (row) => (row.ruled ? row.rulingOutcome : null)]),
  text(['ruling_grade', 'Grade that the ruling names', (row) => (row.ruled ? row.rulingGrade : null)]),
  text(['ruling_reason', 'Reason of the ruling', (row) => (row.ruled ? row.rulingReason : null)]),
  text(['ruled_by', 'Pseudonym of the lead who ruled', (row) => (row.ruled ? row.ruledBy : null)]),
  text([
    'merged_into',
    'Name of the candidate that a lead has told to be the same object and that this one was merged into; that one has a row here ' +
      'only where it is judged',
    (row) => row.mergedInto,
  ]),
  text(['basis', `What the row rests on. ${VISUAL_CAUTION}`, () => 'visual grade, not a spectroscopic confirmation']),
]

export interface GradeOfCandidate extends ReleasedAnswer {
  candidate: string
}

/** `grades.csv`: every answer under its giver's pseudonym, those that do not count too. */
export const GRADE_COLUMNS: readonly Column<GradeOfCandidate>[] = [
  text(['candidate', 'Name of the candidate', (row) => row.candidate]),
  text(['grader', 'Pseudonym of the grader, the same in every release of the campaign', (row) => row.by]),
  text([
    'occasion',
    'first look, repeat, asked for by a lead, or late: it came when the candidate had all its looks',
    (row) => row.occasion,
  ]),
  text(['grade', 'A sure, B probable, C possible, N not a lens, U cannot judge', (row) => row.grade]),
  text(['counts', 'yes or no: whether the verdict rests on it', (row) => (row.notCounted === null ? 'yes' : 'no')]),
  text(['why_not', 'Why it does not count', (row) => row.notCounted]),
  text(['tags', 'What the grader saw, separated by semicolons', (row) => fromJson(row.tags).join('; ') || null]),
  text(['cannot_judge_reason', "Reason given with 'cannot judge'", (row) => row.reason]),
  text(['remark', "The grader's remark", (row) => row.remark]),
  text([
    'given_on',
    'Day, UTC; the time of day is left out, since it can tell who somebody is',
    (row) => row.givenAt.slice(0, 10),
  ]),
]

export interface GraderRow extends ReleasedGrader {
  rates: RunModel['graders'][number] | null
}

const perGrade = (prefix: string, what: string, value: (row: GraderRow, grade: number) => number | null) =>
  GRADES.map((letter, grade) =>
    number<GraderRow>([`${prefix}_${letter.toLowerCase()}`, `${what} ${letter}`, (row) => value(row, grade)]),
  )

/** `graders.csv`: with the calibration counts the reliabilities can be fitted again, although no calibration stamp is in the release. */
export const GRADER_COLUMNS: readonly Column<GraderRow>[] = [
  text(['grader', 'Pseudonym', (row) => row.pseudonym]),
  text([
    'left_out',
    "yes where a lead has left the person's grades out of the consensus",
    (row) => (row.leftOut ? 'yes' : 'no'),
  ]),
  number(['grades', 'Grades of candidates that count, without cannot judge', (row) => row.counted]),
  number(['cannot_judge', "Looks at candidates that count, answered 'cannot judge'", (row) => row.cannotJudge]),
  number(['not_counted', 'Answers that do not count: corrected, repeated, left out', (row) => row.notCounted]),
  ...perGrade(
    'calibration_lens',
    'Calibration stamps that are lenses, graded',
    (row, grade) => row.calibration.lens[GRADES[grade]],
  ),
  ...perGrade(
    'calibration_not_lens',
    'Calibration stamps that are no lenses, graded',
    (row, grade) => row.calibration.notLens[GRADES[grade]],
  ),
  ...perGrade(
    'rate_lens',
    'Fitted share of lenses that this grader gives',
    (row, grade) => row.rates?.lens[grade] ?? null,
  ),
  ...perGrade(
    'rate_not_lens',
    'Fitted share of what is no lens that this grader gives',
    (row, grade) => row.rates?.notLens[grade] ?? null,
  ),
]
