import 'server-only'
import { randomUUID } from 'node:crypto'
import type { Kysely, Transaction } from 'kysely'
import { findOpenAsk, setAskAnswered } from '@/db/queries/asked-looks'
import { requireRecipe } from '@/db/queries/campaigns'
import {
  countLiveLeases,
  findCandidateToGrade,
  findGradeByUid,
  findLateAnswer,
  findStandingAnswer,
  insertGrade,
  isJudgementShown,
  setFirstGradeGiven,
  type CandidateToGrade,
} from '@/db/queries/grading'
import { findRecipe, findRecipeOfStamps } from '@/db/queries/recipes'
import type { DB } from '@/db/schema'
import type { GradeLetter, GradeRow } from '@/db/schema/grading'
import { fromJson, toJson, type IsoTime } from '@/db/schema/values'
import { isoTime } from '@/lib/platform/clock'
import { requestConsensus } from '@/lib/platform/jobs/request-consensus'
import { conflict, invalid, notFound } from '@/lib/platform/problems/problem'
import { calledTo } from '@/lib/work/campaigns/called'
import { ruleInForce, type RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { keepEstimate } from '@/lib/work/queue/keep-estimates'
import { askAnsweredBy } from './asked-answer'
import { consensusDelayMs } from './consensus-due'
import type { GradeInput } from './grade-input'
import { recordLate } from './late-answer'
import { assertMayBegin } from './may-begin'
import { recordRepeat } from './repeat-answer'

export interface GivenGrade {
  id: string
  grade: GradeLetter
  tags: string[]
  reason: string | null
  remark: string | null
  view: string | null
  seconds: number | null
  givenAt: IsoTime
}

export interface RecordedGrade {
  /** What the candidate is called to the person now: its name once they have judged it. */
  called: string
  /** The person's grade of this candidate as it stands now. */
  grade: GivenGrade
  /** The id of the grade that this call corrected. */
  replaced?: string
  /** The id of a look that a lead still waits for: this corrected the earlier grade. To answer it, send it as `asked`. */
  stillAsked?: number
  /** It came when the candidate had all its looks: kept for the person and the leads, and counted nowhere. */
  late?: true
}

/**
 * Records a person's grade of a candidate: the first one, the answer to an asked look, or a correction of the newest, which is a new
 * row that names the row it replaces. A repeated call changes nothing, told by its id or, without one, by its content.
 *
 * A first grade takes a place among the wanted number: the person's lease holds one for them; without a live lease there must be
 * one that neither a grade nor another person's lease has taken, so that a lapsed lease costs nothing as long as there is room.
 * Where there is none, a grade that asks to be kept late is kept beside, as is each correction of it; others are refused.
 * The answer to an asked look is taken in any case. Of somebody who has not graded the candidate it is the first grade where a place
 * is left, so that the rule and the queue count the same looks; else it takes none.
 * @throws Problem 404 not of this campaign, 409 `not-imaged`, `candidate-full`, `grade-id-taken`,
 * `judgement-seen`, `practice-first`, 422 no such recipe.
 */
export async function recordGrade(
  db: Kysely<DB>,
  permit: CampaignPermit<'grade'>,
  candidateId: number,
  input: GradeInput,
): Promise<RecordedGrade> {
  const recorded = await db.transaction().execute(async (transaction) => {
    const candidate = await findCandidateToGrade(transaction, permit.campaign.id, candidateId)
    if (!candidate) throw notFound('candidate')
    if (!candidate.imaged_at) {
      throw conflict('not-imaged', 'This candidate has no pictures yet, so there is nothing to grade. Try again later.')
    }
    const given = await record(transaction, permit, candidate, input)
    return { ...given, called: (await calledTo(transaction, permit, [candidateId]))(candidate) }
  })
  return {
    called: recorded.called,
    grade: shapeGrade(recorded.row),
    ...(recorded.replaced ? { replaced: recorded.replaced } : {}),
    ...(recorded.stillAsked ? { stillAsked: recorded.stillAsked } : {}),
    ...(recorded.row.occasion === 'late' ? { late: true as const } : {}),
  }
}

async function record(
  transaction: Transaction<DB>,
  permit: CampaignPermit<'grade'>,
  candidate: CandidateToGrade,
  input: GradeInput,
): Promise<{ row: GradeRow; replaced: string | null; stillAsked?: number }> {
  const { campaign, viewer } = permit
  const candidateId = candidate.id
  const standing = await findStandingAnswer(transaction, candidateId, viewer.id)
  const late = standing ? null : await findLateAnswer(transaction, candidateId, viewer.id)
  const delivered = await isDelivered(transaction, candidateId, viewer.id, input)
  if (input.turned !== null) {
    const recipeId = await recipeSeen(transaction, campaign.id, candidateId, input.recipe)
    return recordRepeat(transaction, permit, candidateId, input, { recipeId, delivered })
  }
  const known = standing ?? late
  if (known && delivered) return { row: known, replaced: null }
  if (delivered) throw taken()
  const ask = await askAnsweredBy(transaction, candidateId, viewer.id, { asked: input.asked, standing })
  const corrected = ask ? null : standing
  if (corrected && saysTheSame(corrected, input)) return { row: corrected, replaced: null }
  if (late && !ask && saysTheSame(late, input)) return { row: late, replaced: null }
  if (corrected || (late && !ask)) await assertUnswayed(transaction, permit, candidateId)
  const rule = await ruleInForce(transaction, campaign.id)
  if (!standing && !late) await assertMayBegin(transaction, permit, candidate)
  const room = await roomAt(transaction, candidate, viewer.id, rule)
  if (!corrected && !ask && !candidate.is_calibration && (late || room !== 'left')) {
    if (!late && !input.late) throw full(room)
    const recipeId = await recipeSeen(transaction, campaign.id, candidateId, input.recipe)
    return recordLate(transaction, permit, candidateId, input, { recipeId, corrected: late })
  }
  const first = !standing && (!ask || room === 'left')
  const row = await insertGrade(transaction, {
    uid: input.id ?? randomUUID(),
    campaign_id: campaign.id,
    candidate_id: candidateId,
    person_id: viewer.id,
    occasion: first ? 'first' : ask ? 'asked' : (corrected?.occasion ?? 'first'),
    grade: input.grade,
    tags: toJson<string[]>(input.tags),
    reason: input.reason,
    remark: input.remark,
    recipe_id: await recipeSeen(transaction, campaign.id, candidateId, input.recipe),
    view: input.view,
    seconds: input.seconds,
    replaces: corrected?.id ?? null,
    given_at: isoTime(),
  })
  if (ask) await setAskAnswered(transaction, { id: ask.id, gradeId: row.id, candidateId, personId: viewer.id })
  if (first) await setFirstGradeGiven(transaction, candidateId, viewer.id)
  await keepEstimate(transaction, campaign.id, rule, candidateId)
  const enough = rule.method === 'reliability' || candidate.grades_given + (first ? 1 : 0) >= rule.leastGrades
  if (ask || enough) {
    await requestConsensus(transaction, campaign.id, await consensusDelayMs(transaction, campaign.id, rule, row))
  }
  const open = corrected ? await findOpenAsk(transaction, candidateId, viewer.id) : null
  return { row, replaced: corrected?.uid ?? null, stillAsked: open?.id }
}

/**
 * The recipe of the pictures that were judged: the one that is named, else that of the candidate's newest pictures. While a
 * changed recipe is worked through, that is not always the one in force.
 */
async function recipeSeen(
  transaction: Transaction<DB>,
  campaignId: number,
  candidateId: number,
  version: number | null,
): Promise<number> {
  if (version !== null) {
    const named = await findRecipe(transaction, campaignId, version)
    if (named) return named.id
    const reason = `This campaign's recipe has no version ${version}. Send the number that came with the pictures, or none.`
    throw invalid(reason, [{ name: 'recipe', reason }])
  }
  return (await findRecipeOfStamps(transaction, candidateId)) ?? (await requireRecipe(transaction, campaignId)).id
}

/** Whether a grade with this id has been recorded of this person and candidate. */
async function isDelivered(
  transaction: Transaction<DB>,
  candidateId: number,
  personId: number,
  input: GradeInput,
): Promise<boolean> {
  const known = input.id ? await findGradeByUid(transaction, input.id) : null
  if (known && (known.person_id !== personId || known.candidate_id !== candidateId)) {
    throw taken()
  }
  return known !== null
}

const taken = () => conflict('grade-id-taken', 'This grade id belongs to another grade. Make a new id for each grade.')

function saysTheSame(standing: GradeRow, input: GradeInput): boolean {
  return (
    standing.grade === input.grade &&
    standing.remark === input.remark &&
    standing.reason === input.reason &&
    standing.tags === toJson<string[]>(input.tags)
  )
}

/** A grader who has seen what the others said cannot change their mind any more. A lead sees everything by role, and may. */
async function assertUnswayed(
  transaction: Transaction<DB>,
  { role, viewer }: CampaignPermit<'grade'>,
  candidateId: number,
): Promise<void> {
  if (role !== 'grader' || !(await isJudgementShown(transaction, candidateId, viewer.id))) return
  throw conflict(
    'judgement-seen',
    "You have seen the others' grades of this candidate since, so yours stands as you gave it.",
  )
}

const wantedOf = (candidate: CandidateToGrade, rule: RuleInForce) => Math.max(rule.gradesWanted, candidate.looks_asked)

/** Whether a place is left for the person: one that their own live lease holds, or that neither a grade nor another's lease takes. */
async function roomAt(
  transaction: Transaction<DB>,
  candidate: CandidateToGrade,
  personId: number,
  rule: RuleInForce,
): Promise<'left' | 'given' | 'held by others'> {
  const wanted = wantedOf(candidate, rule)
  if (candidate.grades_given >= wanted) return 'given'
  const { own, others } = await countLiveLeases(transaction, candidate.id, personId, isoTime())
  return own === 0 && candidate.grades_given + others >= wanted ? 'held by others' : 'left'
}

/** Without a number: how many looks a candidate took tells how it stands. */
const full = (room: 'given' | 'held by others' | 'left') =>
  conflict(
    'candidate-full',
    room === 'held by others'
      ? 'Your hold on this candidate ran out and other people have it on their benches for its last grades, so yours was not taken. Go on with the next.'
      : 'This candidate has all the grades that it wants by now, so yours was not taken. Nothing else is affected; go on with the next.',
  )

function shapeGrade(row: GradeRow): GivenGrade {
  return {
    id: row.uid,
    grade: row.grade,
    tags: fromJson(row.tags),
    reason: row.reason,
    remark: row.remark,
    view: row.view,
    seconds: row.seconds,
    givenAt: row.given_at,
  }
}
