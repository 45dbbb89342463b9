import 'server-only'
import { setImmediate as nextTurn } from 'node:timers/promises'
import type { Kysely } from 'kysely'
import {
  listCandidatesOfReport,
  listGradesOfPerson,
  type CandidateOfReport,
  type EverGrader,
} from '@/db/queries/reports'
import type { DB } from '@/db/schema'
import { gradeCode } from '@/lib/science/agreement/grade-table'
import { LENS, NOT_A_LENS } from '@/lib/science/agreement/lens-model'
import { UNKNOWN_TRUTH } from '@/lib/science/agreement/dawid-skene-options'

/**
 * All that the reports of a campaign are computed from, as flat typed arrays: 24 bytes an answer. Graders and candidates are
 * numbered from 0; answers stand by grader and, of a grader, in the order in which they were given.
 */
export interface GradeSheet {
  graders: EverGrader[]
  candidates: CandidateOfReport[]
  /** class of each candidate, or UNKNOWN_TRUTH */
  truth: Int8Array
  answers: number
  candidateOf: Int32Array
  graderOf: Uint16Array
  /** 0 to 3 for A to N, or CANNOT_JUDGE */
  gradeOf: Uint8Array
  /** milliseconds since 1970 */
  givenAt: Float64Array
  /** NaN where not told */
  seconds: Float32Array
  /** 1 for the answer that counts for a verdict: of a person and candidate the newest, given first or asked for */
  counts: Uint8Array
  /** 1 for a repeat that no other replaces */
  repeats: Uint8Array
  /** 1 for a look, 0 for its correction */
  isLook: Uint8Array
  /** 1 for a first look, which takes a place of the wanted number; repeats and looks asked for beside it take none */
  isFirst: Uint8Array
}

/** Rows read before other work of the process gets its turn. */
const PAGE = 2000

/** Reads everything up to the given grade, page by page. Only members can have graded, so that their index serves. */
export async function readGradeSheet(
  db: Kysely<DB>,
  campaignId: number,
  graders: EverGrader[],
  newestGradeId: number,
): Promise<GradeSheet> {
  const candidates = await readCandidates(db, campaignId)
  const indexOf = new Map(candidates.map((candidate, index) => [candidate.id, index]))
  const sheet = new GrowingSheet(graders, candidates)
  for (const [grader, { personId }] of graders.entries()) {
    for (let after = 0; ; await nextTurn()) {
      const page = await listGradesOfPerson(db, { campaignId, personId, after, upTo: newestGradeId, limit: PAGE })
      for (const row of page) {
        const candidate = indexOf.get(row.candidateId)
        // One that came after the candidates were read is in the next report.
        if (candidate !== undefined) sheet.add(candidate, grader, row)
      }
      const last = page.at(-1)
      if (!last || page.length < PAGE) break
      after = last.id
    }
    sheet.settleGrader()
  }
  return sheet.finished()
}

async function readCandidates(db: Kysely<DB>, campaignId: number): Promise<CandidateOfReport[]> {
  const all: CandidateOfReport[] = []
  for (let after = 0; ; await nextTurn()) {
    const page = await listCandidatesOfReport(db, { campaignId, after, limit: PAGE })
    all.push(...page)
    const last = page.at(-1)
    if (!last || page.length < PAGE) return all
    after = last.id
  }
}

type Row = Awaited<ReturnType<typeof listGradesOfPerson>>[number]

class GrowingSheet {
  private answers = 0
  private columns = makeColumns(1024)
  /** of the grader being read: the place of the newest answer of each candidate, and of each repeat by its id */
  private readonly newest = new Map<number, number>()
  private readonly repeatPlace = new Map<number, number>()

  constructor(
    private readonly graders: EverGrader[],
    private readonly candidates: CandidateOfReport[],
  ) {}

  add(candidate: number, grader: number, row: Row): void {
    if (this.answers === this.columns.gradeOf.length) this.columns = makeColumns(this.answers * 2, this.columns)
    const at = this.answers++
    const { columns } = this
    columns.candidateOf[at] = candidate
    columns.graderOf[at] = grader
    columns.gradeOf[at] = gradeCode(row.grade)
    columns.givenAt[at] = Date.parse(row.givenAt)
    columns.seconds[at] = row.seconds ?? NaN
    columns.isLook[at] = row.replaces === null ? 1 : 0
    columns.isFirst[at] = columns.isLook[at] === 1 && row.occasion === 'first' ? 1 : 0
    if (row.occasion === 'repeat') {
      const replaced = row.replaces === null ? undefined : this.repeatPlace.get(row.replaces)
      if (replaced !== undefined) columns.repeats[replaced] = 0
      columns.repeats[at] = 1
      this.repeatPlace.set(row.id, at)
      return
    }
    // A look like others for pace and hours, counted in nothing else.
    if (row.occasion === 'late') return
    const former = this.newest.get(candidate)
    if (former !== undefined) columns.counts[former] = 0
    columns.counts[at] = 1
    this.newest.set(candidate, at)
  }

  settleGrader(): void {
    this.newest.clear()
    this.repeatPlace.clear()
  }

  finished(): GradeSheet {
    const truth = Int8Array.from(this.candidates, (candidate) =>
      candidate.truth === null ? UNKNOWN_TRUTH : candidate.truth === 'lens' ? LENS : NOT_A_LENS,
    )
    const cut = makeColumns(this.answers, this.columns)
    return { graders: this.graders, candidates: this.candidates, truth, answers: this.answers, ...cut }
  }
}

type Columns = Pick<
  GradeSheet,
  'candidateOf' | 'graderOf' | 'gradeOf' | 'givenAt' | 'seconds' | 'counts' | 'repeats' | 'isLook' | 'isFirst'
>

/** Columns of the given length, beginning with what the former hold. */
function makeColumns(length: number, former?: Columns): Columns {
  const made: Columns = {
    candidateOf: new Int32Array(length),
    graderOf: new Uint16Array(length),
    gradeOf: new Uint8Array(length),
    givenAt: new Float64Array(length),
    seconds: new Float32Array(length),
    counts: new Uint8Array(length),
    repeats: new Uint8Array(length),
    isLook: new Uint8Array(length),
    isFirst: new Uint8Array(length),
  }
  if (former) {
    for (const key of Object.keys(made) as (keyof Columns)[]) made[key].set(former[key].subarray(0, length))
  }
  return made
}
