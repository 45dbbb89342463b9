import 'server-only'
import { setImmediate as nextTurn } from 'node:timers/promises'
import type { Kysely } from 'kysely'
import { listCandidatesOfRun, listCountedAnswers, type CountedAnswer } from '@/db/queries/consensus'
import type { DB } from '@/db/schema'
import { CANNOT_JUDGE, gradeCode, type GradesByCandidate } from '@/lib/science/agreement/grade-table'
import { UNKNOWN_TRUTH } from '@/lib/science/agreement/dawid-skene-options'
import { GRADES } from '@/lib/science/agreement/grades'
import { LENS, NOT_A_LENS } from '@/lib/science/agreement/lens-model'
import { GrowingInts } from './growing-ints'
import type { InputDigest } from './input-digest'

/** Candidates read before other work of the process gets its turn. */
export const PAGE = 500

/** Everything that a run reads, as flat arrays: some 5 bytes a grade and 15 a candidate. */
export interface RunGrades {
  /** in ascending order, calibration stamps among them */
  ids: Int32Array
  /** LENS, NOT_A_LENS or UNKNOWN_TRUTH */
  truth: Int32Array
  cannotJudge: Int32Array
  /** newest id among the counted answers; 0 for none */
  newestAnswer: Int32Array
  /** Person of each grader of the table, in the order in which they come. */
  people: number[]
  /** Who has answered at candidates that are no stamps, 'cannot judge' included. */
  peopleAtCandidates: Set<number>
  table: GradesByCandidate
}

/**
 * Reads the answers that count, page by page, and puts them into the digest. Answers of people who are left out are passed over;
 * calibration stamps are read where the method learns from them.
 */
export async function readGrades(
  db: Kysely<DB>,
  input: { campaignId: number; newestGradeId: number; newestCandidateId: number },
  { leftOut, withCalibration, digest }: { leftOut: ReadonlySet<number>; withCalibration: boolean; digest: InputDigest },
): Promise<RunGrades> {
  const [ids, truth, cannotJudge, newestAnswer, start, cell] = Array.from({ length: 6 }, () => new GrowingInts())
  const graderOf = new Map<number, number>()
  const peopleAtCandidates = new Set<number>()
  start.push(0)
  for (let after = 0; ; await nextTurn()) {
    const page = await listCandidatesOfRun(db, {
      campaignId: input.campaignId,
      after,
      upTo: input.newestCandidateId,
      limit: PAGE,
      withCalibration,
    })
    const last = page.at(-1)
    if (!last) break
    after = last.id
    const range = { campaignId: input.campaignId, from: page[0].id, to: last.id, upTo: input.newestGradeId }
    const answers = await listCountedAnswers(db, range)
    const counted: CountedAnswer[] = []
    let at = 0
    for (const candidate of page) {
      while (at < answers.length && answers[at].candidateId < candidate.id) at += 1
      let unjudged = 0
      let newest = 0
      for (; at < answers.length && answers[at].candidateId === candidate.id; at++) {
        const answer = answers[at]
        if (leftOut.has(answer.personId)) continue
        counted.push(answer)
        newest = Math.max(newest, answer.id)
        if (candidate.truth === null) peopleAtCandidates.add(answer.personId)
        const code = gradeCode(answer.grade)
        if (code === CANNOT_JUDGE) unjudged += 1
        else cell.push(numberOf(graderOf, answer.personId) * GRADES.length + code)
      }
      ids.push(candidate.id)
      truth.push(candidate.truth === null ? UNKNOWN_TRUTH : candidate.truth === 'lens' ? LENS : NOT_A_LENS)
      cannotJudge.push(unjudged)
      newestAnswer.push(newest)
      start.push(cell.length)
    }
    digest.add(page, counted)
  }
  return {
    ids: ids.taken(),
    truth: truth.taken(),
    cannotJudge: cannotJudge.taken(),
    newestAnswer: newestAnswer.taken(),
    people: [...graderOf.keys()],
    peopleAtCandidates,
    table: {
      candidates: ids.length,
      graders: graderOf.size,
      grades: GRADES.length,
      start: start.taken(),
      cell: cell.taken(),
    },
  }
}

function numberOf(graders: Map<number, number>, personId: number): number {
  const known = graders.get(personId)
  if (known !== undefined) return known
  graders.set(personId, graders.size)
  return graders.size - 1
}
