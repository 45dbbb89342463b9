import type { CandidateWithVerdict, NewVerdict } from '@/db/queries/consensus'

export type Judgement = Omit<NewVerdict, 'candidateId' | 'reason'>

export interface Judged {
  judgement: Judgement
  /** In words; made only where it is asked for. */
  reason: () => string
  /** Whether this is another decision than the candidate's verdict before, so that a new verdict is written. */
  differs: (before: CandidateWithVerdict) => boolean
}

/** What a method makes of the candidate in a row of what the run read. */
export type Judge = (row: number) => Judged
