import type { Generated, Selectable } from 'kysely'
import type { CandidateState, StateCause } from './intake'
import type { IsoTime, Json } from './values'

/** Calibration candidates are in none of these numbers. States are those of the verdicts, before any ruling. */
export interface RunSummary {
  candidates: number
  /** Answers that are grades; 'cannot judge' is not one. */
  grades: number
  cannotJudge: number
  graders: number
  open: number
  split: number
  confirmed: number
  setAside: number
  /** Verdicts that differ from the candidate's verdict before. */
  changed: number
  alphaOrdinal: number | null
  alphaNote: string | null
  fleissKappa: number | null
  kappaNote: string | null
}

export interface RunTable {
  id: Generated<number>
  campaign_id: number
  rule_id: number
  /** SHA-256 over the rule and every standing grade, in a fixed order. */
  input_digest: string
  /** What the run read: grades and candidates up to these rows. With the rule they are its whole input. */
  newest_grade_id: number
  newest_candidate_id: number
  summary: Json<RunSummary>
  /** null when it started by itself. */
  started_by: number | null
  created_at: IsoTime
}
export type Run = Selectable<RunTable>

export interface VerdictTable {
  id: Generated<number>
  run_id: number
  candidate_id: number
  outcome: CandidateState
  grades: number
  cannot_judge: number
  mean: number | null
  spread: number | null
  probability: number | null
  reason: string
}
export type Verdict = Selectable<VerdictTable>

export type RulingOutcome = 'confirmed' | 'set aside' | 'open' | 'by verdict'

export interface RulingTable {
  id: Generated<number>
  candidate_id: number
  person_id: number
  outcome: RulingOutcome
  grade: 'A' | 'B' | 'C' | null
  reason: string
  created_at: IsoTime
}
export type Ruling = Selectable<RulingTable>

export interface StateChangeTable {
  id: Generated<number>
  candidate_id: number
  from_state: CandidateState
  to_state: CandidateState
  cause: StateCause
  cause_id: number
  at: IsoTime
}
export type StateChange = Selectable<StateChangeTable>
