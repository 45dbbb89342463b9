import 'server-only'
import type { Kysely } from 'kysely'
import type { DB } from '@/db/schema'
import type { RulingOutcome } from '@/db/schema/consensus'
import type { GradeLetter } from '@/db/schema/grading'
import type { CandidateState, StateCause } from '@/db/schema/intake'
import type { IsoTime } from '@/db/schema/values'
import type { CampaignPermit } from '@/lib/work/people/permission'
import type { CandidatePictures } from '@/lib/work/stamps/candidate-pictures'

/** Everything there is to say about one candidate, for the case of a split and for the candidate's page. */
export interface CandidateEvidence {
  id: number
  name: string
  /** ICRS degrees */
  raDeg: number | null
  decDeg: number | null
  pixelScaleArcsec: number | null
  lensRedshift: number | null
  sourceRedshift: number | null
  files: { name: string; bands: string[] }[]
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
  votes: Record<GradeLetter, number>
  /** The answers that count: the newest standing one of each person, surest first. */
  grades: EvidenceGrade[]
  verdict: EvidenceVerdict | null
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
  occasion: 'first' | 'asked'
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
  reason: string
  /** The rule of the run that gave the verdict. */
  rule: {
    version: number
    gradesWanted: number
    leastGrades: number
    confirmMean: number
    setAsideMean: number
    splitSpread: number
  }
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

/** @throws Problem 404 where the campaign has no such candidate. */
export async function candidateEvidence(
  _db: Kysely<DB>,
  _permit: CampaignPermit<'read'>,
  _candidateId: number,
): Promise<CandidateEvidence> {
  throw new Error('The evidence of a candidate cannot be read yet.')
}
