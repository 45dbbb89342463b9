import { Readable } from 'node:stream'
import Papa from 'papaparse'
import { GRADES, type Answer } from '@/lib/science/agreement/grades'
import type { RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import type { Judged } from '@/lib/work/consensus/judge'
import { compareCopies } from './compare-copies'
import { compareEntry, RowCheck, type Difference, type Row } from './compare-entry'
import { judgeReleased, ReleasedGrades } from './judge-released'
import { NotARelease, ReleaseZip } from './read-release-zip'
import { RuleFile } from './rule-file'

export interface Reproduction {
  release: number
  campaign: string
  kind: 'release' | 'erratum' | 'retraction'
  verdicts: number
  grades: number
  differences: Difference[]
}

/**
 * Recomputes every verdict of a release from its grades, its rule and, by the reliability method, reliabilities that are fitted again
 * from these grades and the calibration counts; then what the catalogue says of each entry. Needs the archive and nothing else.
 * @throws NotARelease with a sentence where the archive is none, or damaged.
 */
export async function reproduce(path: string): Promise<Reproduction> {
  const zip = await ReleaseZip.open(path)
  try {
    return await recompute(zip)
  } finally {
    zip.close()
  }
}

async function recompute(zip: ReleaseZip): Promise<Reproduction> {
  const said = await readRule(zip)
  const graders: Row[] = []
  for await (const row of rows(zip, 'graders.csv')) graders.push(row)
  const leftOut = new Set(graders.filter((row) => row.left_out === 'yes').map(({ grader }) => grader))
  const released = new ReleasedGrades(graders.map(({ grader }) => grader))
  const differences: Difference[] = []
  let grades = 0
  for await (const { row, answers, miscounted } of withAnswers(zip, leftOut)) {
    differences.push(...miscounted)
    grades += answers.length
    try {
      released.add(answers)
    } catch (error) {
      throw new NotARelease(`${(error as Error).message} It has graded ${row.name}.`)
    }
  }
  released.addCalibration(
    graders.map((row) => {
      const counts = (truth: string) =>
        GRADES.map((grade) => (row.left_out === 'yes' ? 0 : number(row, `calibration_${truth}_${grade.toLowerCase()}`)))
      return { lens: counts('lens'), notLens: counts('not_lens') }
    }),
  )
  const { judge } = await judgeReleased({ id: 0, ...said.rule } as RuleInForce, released)
  let verdicts = 0
  let entries = 0
  const catalogue = rows(zip, 'catalogue.csv')
  let entry = await catalogue.next()
  for await (const { row, answers } of withAnswers(zip, leftOut)) {
    const judged = judge(verdicts++)
    differences.push(...compareCandidate(row, judged))
    const isEntry = !entry.done && entry.value.name === row.name
    if (isEntry !== (row.state === 'confirmed')) {
      const [inFile, expected] = isEntry ? ['an entry', 'none'] : ['no entry', 'one']
      differences.push({ candidate: row.name, what: 'catalogue', released: inFile, recomputed: expected })
    }
    if (!isEntry) continue
    entries += 1
    differences.push(...compareEntry(entry.value as Row, row, judged, votesOf(answers)))
    entry = await catalogue.next()
  }
  if (!entry.done) throw new NotARelease(`catalogue.csv has '${entry.value.name}' out of the order of candidates.csv.`)
  const { release, campaign, kind } = said
  for (const [file, expected, found] of [
    ['candidates.csv', said.candidates, verdicts],
    ['catalogue.csv', said.entries, entries],
  ] as const) {
    if (expected === found) continue
    differences.push({ candidate: file, what: 'rows', released: `${expected} by rule.json`, recomputed: `${found}` })
  }
  // Beside a catalogue that was changed its copies tell nothing more.
  if (differences.length === 0) differences.push(...(await compareCopies(zip, () => rows(zip, 'catalogue.csv'))))
  return { release, campaign, kind, verdicts, grades, differences }
}

async function readRule(zip: ReleaseZip) {
  const foreign = new NotARelease('rule.json is not one that this version of Ringside understands.')
  const text = await zip.text('rule.json')
  let value: unknown
  try {
    value = JSON.parse(text)
  } catch {
    throw foreign
  }
  const parsed = RuleFile.safeParse(value)
  if (!parsed.success) throw foreign
  return parsed.data
}

interface Counted {
  by: string
  grade: Answer
}

/**
 * Each row of `candidates.csv` with its grades that count: of each grader the last one that was a first look or asked for, unless the
 * grader is left out. `miscounted` is where `grades.csv` says otherwise. Both files are in the order of the candidates, and a grader's
 * grades in the order in which they were given; candidates without a grade are in the first file only.
 */
async function* withAnswers(
  zip: ReleaseZip,
  leftOut: ReadonlySet<string>,
): AsyncGenerator<{ row: Row; answers: Counted[]; miscounted: Difference[] }, void, void> {
  const gradeRows = rows(zip, 'grades.csv')
  let next = await gradeRows.next()
  for await (const row of rows(zip, 'candidates.csv')) {
    const own: Row[] = []
    for (; !next.done && next.value.candidate === row.name; next = await gradeRows.next()) own.push(next.value)
    const last = new Map<string, Row>()
    for (const one of own) {
      if (!/^[ABCNU]$/.test(one.grade)) {
        throw new NotARelease(`grades.csv has a grade that is none: '${one.grade}' of ${row.name}.`)
      }
      if (one.occasion === 'first' || one.occasion === 'asked') last.set(one.grader, one)
    }
    const miscounted: Difference[] = []
    const answers: Counted[] = []
    for (const one of own) {
      const counts = last.get(one.grader) === one && !leftOut.has(one.grader)
      if (counts) answers.push({ by: one.grader, grade: one.grade as Answer })
      if (counts === (one.counts === 'yes')) continue
      const [released, recomputed] = counts ? ['not counted', 'counted'] : ['counted', 'not counted']
      miscounted.push({ candidate: row.name, what: `a grade of ${one.grader}`, released, recomputed })
    }
    yield { row, answers, miscounted }
  }
  if (!next.done) {
    throw new NotARelease(`grades.csv has grades of '${next.value.candidate}' out of the order of candidates.csv.`)
  }
}

function votesOf(answers: readonly Counted[]): Record<Answer, number> {
  const votes = { A: 0, B: 0, C: 0, N: 0, U: 0 }
  for (const { grade } of answers) votes[grade] += 1
  return votes
}

function compareCandidate(row: Row, { judgement }: Pick<Judged, 'judgement'>): Difference[] {
  const unseen = judgement.grades + judgement.cannotJudge === 0
  const outcome = unseen && row.first_pass === 'not sent on' ? 'set aside' : judgement.outcome
  const check = new RowCheck(row)
  check.text('verdict', 'verdict', outcome)
  check.text('state', 'state', row.ruling || outcome)
  check.number('grades', 'n_grades', judgement.grades)
  check.number('cannot judge', 'n_cannot_judge', judgement.cannotJudge)
  check.number('mean', 'mean_points', judgement.mean)
  check.number('spread', 'spread_points', judgement.spread)
  check.number('probability', 'probability', judgement.probability)
  return check.differences
}

function number(row: Row, column: string): number {
  const value = Number(row[column])
  if (!Number.isSafeInteger(value) || value < 0) {
    throw new NotARelease(`graders.csv says '${row[column]}' for ${column} of ${row.grader}, which is no count.`)
  }
  return value
}

/** Read as they are unpacked: a file of millions of grades is never held as a whole. */
async function* rows(zip: ReleaseZip, name: string): AsyncGenerator<Row, void, void> {
  const parser = Papa.parse(Papa.NODE_STREAM_INPUT, { header: true, newline: '\r\n', skipEmptyLines: true })
  const source = Readable.from(zip.bytes(name))
  source.on('error', (error) => parser.destroy(error))
  source.pipe(parser)
  for await (const row of parser) yield row as Row
}
