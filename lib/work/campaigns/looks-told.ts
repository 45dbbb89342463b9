import type { LookSums } from '@/db/queries/overview'
import type { Rule } from '@/db/schema/campaigns'
import type { Role } from '@/db/schema/people'

export interface LooksTold {
  given: number
  /** Looks wanted altogether: by the reliability method at most. null where it must not be told. */
  wanted: number | null
  /** Candidates that want more looks. null where it must not be told. */
  waiting: number | null
}

/**
 * By the reliability method looks end with the grade that decides. A grader who saw what is still wanted could grade, look,
 * correct the grade and look again, and would know what the others' grades come to.
 */
export function looksTold({ given, wanted, waiting }: LookSums, role: Role, method: Rule['method']): LooksTold {
  const untold = role === 'grader' && method === 'reliability'
  return { given, wanted: untold ? null : wanted, waiting: untold ? null : waiting }
}
