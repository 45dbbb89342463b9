import { Readable } from 'node:stream'
import Papa from 'papaparse'
import { GRADES, type Answer } from '@/lib/science/agreement/grades'
import type { RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import { judgeReleased, ReleasedGrades, type ReleasedJudge } from './judge-released'
import { NotARelease, ReleaseZip } from './read-release-zip'
import { RuleFile } from './rule-file'

/** One thing that the release says otherwise than its grades. */
export interface Difference {
  candidate: string
  what: 'verdict' | 'state' | 'grades' | 'cannot judge' | 'mean' | 'spread' | 'probability' | 'catalogue'
  released: string
  recomputed: string
}

export interface Reproduction {
  release: number
  campaign: string
  kind: 'release' | 'erratum' | 'retraction'
  verdicts: number
  grades: number
  differences: Difference[]
}

/**
 * Released and recomputed numbers come from the same sums in the same order. Only the logarithm and exponential of another machine
 * may round otherwise, and the iteration carries that no further than this.
 */
const TOLERANCE = 1e-9

type Row = Record<string, string>

/**
 * Recomputes every verdict of a release from its grades, its rule and, by the reliability method, reliabilities that are fitted again
 * from these grades and the calibration counts. Needs the archive and nothing else.
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
  const parsed = RuleFile.safeParse(JSON.parse(await zip.text('rule.json')))
  if (!parsed.success) throw new NotARelease('rule.json is not one that this version of Ringside understands.')
  const { rule, release, campaign, kind } = parsed.data
  const graders: Row[] = []
  for await (const row of rows(zip, 'graders.csv')) graders.push(row)
  const released = new ReleasedGrades(graders.map(({ grader }) => grader))
  const grades = await addGrades(zip, released)
  released.addCalibration(
    graders.map((row) => {
      const counts = (truth: string) =>
        GRADES.map((grade) => (row.left_out === 'yes' ? 0 : number(row, `calibration_${truth}_${grade.toLowerCase()}`)))
      return { lens: counts('lens'), notLens: counts('not_lens') }
    }),
  )
  const ruleInForce = { id: 0, ...rule } as RuleInForce
  const judged = await judgeReleased(ruleInForce, released)
  const differences: Difference[] = []
  let verdicts = 0
  const entries = rows(zip, 'catalogue.csv')
  let entry = await entries.next()
  for await (const row of rows(zip, 'candidates.csv')) {
    differences.push(...compare(row, judged, verdicts++))
    const isEntry = !entry.done && entry.value.name === row.name
    if (isEntry !== (row.state === 'confirmed')) {
      const [released, recomputed] = isEntry ? ['an entry', 'none'] : ['no entry', 'one']
      differences.push({ candidate: row.name, what: 'catalogue', released, recomputed })
    }
    if (isEntry) entry = await entries.next()
  }
  if (!entry.done) throw new NotARelease(`catalogue.csv has '${entry.value.name}' out of the order of candidates.csv.`)
  return { release, campaign, kind, verdicts, grades, differences }
}

/** Both files are in the order of the candidates; those without a grade are in the first only. Returns how many grades count. */
async function addGrades(zip: ReleaseZip, released: ReleasedGrades): Promise<number> {
  const gradeRows = rows(zip, 'grades.csv')
  let next = await gradeRows.next()
  let count = 0
  for await (const { name } of rows(zip, 'candidates.csv')) {
    const answers: { by: string; grade: Answer }[] = []
    for (; !next.done && next.value.candidate === name; next = await gradeRows.next()) {
      const { grader, grade, counts } = next.value
      if (counts !== 'yes') continue
      if (!/^[ABCNU]$/.test(grade)) throw new NotARelease(`grades.csv has a grade that is none: '${grade}' of ${name}.`)
      answers.push({ by: grader, grade: grade as Answer })
    }
    count += answers.length
    try {
      released.add(answers)
    } catch (error) {
      throw new NotARelease(`${(error as Error).message} It has graded ${name}.`)
    }
  }
  if (!next.done)
    throw new NotARelease(`grades.csv has grades of '${next.value.candidate}' out of the order of candidates.csv.`)
  return count
}

function compare(row: Row, { judge }: ReleasedJudge, place: number): Difference[] {
  const { judgement } = judge(place)
  const unseen = judgement.grades + judgement.cannotJudge === 0
  const outcome = unseen && row.first_pass === 'not sent on' ? 'set aside' : judgement.outcome
  const differences: Difference[] = []
  const check = (what: Difference['what'], agrees: boolean, released: string, recomputed: string) => {
    if (!agrees) differences.push({ candidate: row.name, what, released, recomputed })
  }
  const same = (what: Difference['what'], released: string, recomputed: string) =>
    check(what, released === recomputed, released || 'nothing', recomputed)
  const near = (what: Difference['what'], released: string, recomputed: number | null) => {
    const agrees =
      released === '' || recomputed === null
        ? released === '' && recomputed === null
        : Math.abs(Number(released) - recomputed) <= TOLERANCE
    check(what, agrees, released || 'nothing', recomputed === null ? 'nothing' : String(recomputed))
  }
  same('verdict', row.verdict, outcome)
  same('state', row.state, row.ruling || outcome)
  same('grades', row.n_grades, String(judgement.grades))
  same('cannot judge', row.n_cannot_judge, String(judgement.cannotJudge))
  near('mean', row.mean_points, judgement.mean)
  near('spread', row.spread_points, judgement.spread)
  near('probability', row.probability, judgement.probability)
  return differences
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
