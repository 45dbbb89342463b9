import type { BenchCandidate } from '@/lib/work/queue/lend-next'

/** Which look it was: a candidate that came back turned is looked at twice. */
export interface LookId {
  candidateId: number
  turned?: number
}

export const lookIdOf = ({ id, turned }: Pick<BenchCandidate, 'id' | 'turned'>): LookId =>
  turned ? { candidateId: id, turned } : { candidateId: id }

export const isLook = (
  { candidate }: { candidate: Pick<BenchCandidate, 'id' | 'turned'> },
  { candidateId, turned }: LookId,
): boolean => candidate.id === candidateId && (candidate.turned ?? 0) === (turned ?? 0)
