import 'server-only'
import type { Kysely } from 'kysely'
import { findCandidate, findDesignation, listFilesOf } from '@/db/queries/candidates'
import { listLateAnswersOf } from '@/db/queries/late-grades'
import { listLeftOutNow } from '@/db/queries/left-out'
import { listAnswersOf, listVerdictsOf, type EvidenceAnswer } from '@/db/queries/verdicts'
import { listRulingsOf, listStateChanges } from '@/db/queries/rulings'
import type { DB } from '@/db/schema'
import type { RulingOutcome } from '@/db/schema/consensus'
import type { GradeLetter } from '@/db/schema/grading'
import type { Candidate, CandidateState, StateCause } from '@/db/schema/intake'
import { fromJson, type IsoTime } from '@/db/schema/values'
import { notFound } from '@/lib/platform/problems/problem'
import { CLOSE_FIELD_ARCSEC } from '@/lib/science/imaging/recipe'
import { calledTo } from '@/lib/work/campaigns/called'
import { candidateScope } from '@/lib/work/campaigns/candidate-scope'
import { ruleOf, type RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import { answeredPeople } from '@/lib/work/discussion/list-asks'
import { noteShown, revealedTo } from '@/lib/work/grading/may-reveal'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { picturesOf, type CandidatePictures } from '@/lib/work/stamps/candidate-pictures'
import { describeRuling } from './describe-ruling'
import type { ReliabilityWhy } from './explain-reliability'
import { findWhy } from './find-why'
import { reasonInShort } from './reason-in-short'
import { withoutMergedNames } from './without-merged-names'

/** Everything there is to say about one candidate, for the case of a split and for the candidate's page. */
export interface CandidateEvidence {
  id: number
  /** To a grader who has not judged it yet: its number. */
  name: string
  /** ICRS degrees */
  raDeg: number | null
  decDeg: number | null
  pixelScaleArcsec: number | null
  /** null for graders */
  files: { name: string; bands: string[] }[] | null
  pictures: CandidatePictures
  /** null: withheld from a grader who has not graded this candidate yet. */
  judgement: Judgement | null
}

/** What people and the rule have made of it. */
export interface Judgement {
  state: CandidateState
  stateSince: IsoTime
  /** Why the candidate is in its state, a sentence. */
  stateReason: string
  /** Told to leads only; the truth itself never leaves the server. */
  calibration: boolean
  /** of the machine search */
  score: number | null
  /** They say that somebody took it for a lens, and the source's that there is one. */
  lensRedshift: number | null
  sourceRedshift: number | null
  votes: Record<GradeLetter, number>
  /** The answers that count: the newest standing one of each person, surest first. */
  grades: EvidenceGrade[]
  /** What came when the candidate had all its looks and counts nowhere: for leads, and of a person their own. */
  late: EvidenceGrade[]
  verdict: EvidenceVerdict | null
  /** Of a verdict by reliability: how it comes about. */
  why: ReliabilityWhy | null
  /** newest first */
  rulings: EvidenceRuling[]
  /** The newest ruling, unless it handed the candidate back to the verdict. */
  standingRuling: EvidenceRuling | null
  /** oldest first */
  history: EvidenceStateChange[]
  /** null: never in the catalogue, or no position. Kept while out of the catalogue. */
  designation: string | null
}

export interface EvidenceGrade {
  id: number
  /** The person's name for leads, the pseudonym for everybody else. */
  by: string
  /** The grade of the person who asks. */
  own: boolean
  grade: GradeLetter
  /** Of somebody who was asked for a look, whether it took a place of the wanted number or not. */
  occasion: 'first' | 'asked' | 'late'
  /** An asked look of somebody who could see the others' grades before. */
  informed: boolean
  /** Left out of the consensus now: it does not count. A grader learns it of themselves only. */
  leftOut: boolean
  tags: string[]
  remark: string | null
  seconds: number | null
  givenAt: IsoTime
}

export interface EvidenceVerdict {
  id: number
  outcome: CandidateState
  grades: number
  cannotJudge: number
  /** grade points */
  mean: number | null
  spread: number | null
  /** of a lens, by the reliability method; null by the mean */
  probability: number | null
  reason: string
  /** The rule of the run that gave the verdict. */
  rule: RuleInForce
  at: IsoTime
}

export interface EvidenceRuling {
  id: number
  by: string
  outcome: RulingOutcome
  grade: 'A' | 'B' | 'C' | null
  reason: string
  at: IsoTime
}

export interface EvidenceStateChange {
  id: number
  from: CandidateState
  to: CandidateState
  cause: StateCause
  /** What caused it, in words: the verdict's reason, or who ruled and why. */
  reason: string
  at: IsoTime
}

/**
 * Leads read names, everybody else pseudonyms; a grader who has not judged the candidate gets no judgement at all.
 * @throws Problem 404 where the campaign has no such candidate; for a viewer a calibration candidate is none.
 */
export async function candidateEvidence(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  candidateId: number,
): Promise<CandidateEvidence> {
  const candidate = await findCandidate(db, permit.campaign.id, candidateId)
  const hidden = !candidateScope(permit).withCalibration && candidate?.truth != null
  if (!candidate || hidden) throw notFound('candidate')
  const pictures = (await picturesOf(db, permit.campaign, [candidateId])).get(candidateId)
  const revealed = (await revealedTo(db, permit, [candidateId])).has(candidateId)
  if (revealed) await noteShown(db, permit, [candidateId])
  return {
    id: candidate.id,
    name: (await calledTo(db, permit, [candidateId]))(candidate),
    raDeg: candidate.ra_deg,
    decDeg: candidate.dec_deg,
    pixelScaleArcsec: candidate.pixel_scale_arcsec,
    // Those of a stamp that was made here are called otherwise than what was delivered.
    files: permit.role === 'grader' ? null : await listFilesOf(db, candidateId),
    pictures: pictures ?? {
      views: [],
      geometry: { pixelScaleArcsec: null, northAngleDeg: null, eastLeft: true },
      recipe: null,
      closeFieldArcsec: CLOSE_FIELD_ARCSEC,
      planesUrl: null,
    },
    judgement: revealed ? await judgementOf(db, permit, candidate) : null,
  }
}

async function judgementOf(db: Kysely<DB>, permit: CampaignPermit<'read'>, candidate: Candidate): Promise<Judgement> {
  const named = permit.role === 'lead'
  const onlyOwn = permit.role === 'grader'
  const by = (person: { name: string; pseudonym: string | null }) =>
    named ? person.name : (person.pseudonym ?? 'a member')
  const [answers, late, verdictRows, rulingRows, changes, designation, asked, leftOut] = await Promise.all([
    listAnswersOf(db, candidate.id, { graderId: onlyOwn ? permit.viewer.id : undefined }),
    listLateAnswersOf(db, candidate.id, named ? null : permit.viewer.id),
    listVerdictsOf(db, candidate.id),
    listRulingsOf(db, candidate.id),
    listStateChanges(db, candidate.id),
    findDesignation(db, candidate.id),
    answeredPeople(db, candidate.id),
    listLeftOutNow(db, permit.campaign.id),
  ])
  const verdicts = verdictRows.map(({ rule, ...verdict }) => ({ ...verdict, rule: ruleOf(rule) }))
  const toldRulings = onlyOwn ? await withoutMergedNames(db, permit, rulingRows) : rulingRows
  const rulings = toldRulings.map((row) => ({
    id: row.id,
    by: by(row),
    outcome: row.outcome,
    grade: row.grade,
    reason: row.reason,
    at: row.created_at,
  }))
  const causeInWords = (cause: StateCause, id: number) => {
    if (cause === 'verdict') return reasonInShort(verdicts.find((verdict) => verdict.id === id)?.reason ?? 'A verdict.')
    const ruling = rulings.find((row) => row.id === id)
    return ruling ? describeRuling(ruling) : 'A ruling.'
  }
  const newest = rulings.at(0)
  const given = verdicts.at(-1)
  // What is still open looks to a grader as a calibration stamp does, of which nothing is ever decided.
  const verdict = onlyOwn && given?.outcome === 'open' ? undefined : given
  const reader = { id: permit.viewer.id, named, onlyOwn }
  const { state_cause: cause, state_cause_id: causeId } = candidate
  return {
    state: candidate.state,
    stateSince: candidate.state_since,
    stateReason: cause && causeId !== null ? causeInWords(cause, causeId) : 'Open: nothing has decided it yet.',
    calibration: named && candidate.truth !== null,
    score: candidate.score,
    lensRedshift: candidate.lens_redshift,
    sourceRedshift: candidate.source_redshift,
    votes: countLetters(answers),
    grades: answers
      .map((answer) => ({
        ...gradeOf(answer, by(answer), permit.viewer.id, asked.get(answer.personId)),
        leftOut: leftOut.some(
          ({ personId }) => personId === answer.personId && (!onlyOwn || personId === permit.viewer.id),
        ),
      }))
      .sort(surestFirst),
    late: late.map((answer) => ({
      ...gradeOf(answer, by(answer), permit.viewer.id, undefined),
      occasion: 'late',
      leftOut: false,
    })),
    verdict: verdict ? { ...verdict, reason: reasonInShort(verdict.reason) } : null,
    why: verdict ? await findWhy(db, candidate.id, verdict, reader) : null,
    rulings,
    standingRuling: newest && newest.outcome !== 'by verdict' ? newest : null,
    history: changes.map((change) => ({
      id: change.id,
      from: change.from_state,
      to: change.to_state,
      cause: change.cause,
      reason: causeInWords(change.cause, change.cause_id),
      at: change.at,
    })),
    designation,
  }
}

const LETTERS: readonly GradeLetter[] = ['A', 'B', 'C', 'N', 'U']

function countLetters(answers: readonly EvidenceAnswer[]): Record<GradeLetter, number> {
  const votes = { A: 0, B: 0, C: 0, N: 0, U: 0 }
  for (const { grade } of answers) votes[grade] += 1
  return votes
}

function gradeOf(
  answer: EvidenceAnswer,
  by: string,
  viewerId: number,
  asked: { informed: boolean } | undefined,
): Omit<EvidenceGrade, 'leftOut'> {
  return {
    id: answer.id,
    by,
    own: answer.personId === viewerId,
    grade: answer.grade,
    occasion: asked ? 'asked' : 'first',
    informed: asked?.informed ?? false,
    tags: fromJson(answer.tags),
    remark: answer.remark,
    seconds: answer.seconds,
    givenAt: answer.givenAt,
  }
}

function surestFirst(a: EvidenceGrade, b: EvidenceGrade): number {
  return LETTERS.indexOf(a.grade) - LETTERS.indexOf(b.grade) || a.id - b.id
}
