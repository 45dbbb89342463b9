import type { RulingOutcome } from '@/db/schema/consensus'

/** What a ruling says, without who and why: 'confirmed as B', 'set aside', 'reopened', 'handed back to the verdict'. */
export function describeOutcome(ruling: { outcome: RulingOutcome; grade: 'A' | 'B' | 'C' | null }): string {
  if (ruling.outcome === 'confirmed') return ruling.grade ? `confirmed as ${ruling.grade}` : 'confirmed'
  if (ruling.outcome === 'open') return 'reopened'
  if (ruling.outcome === 'by verdict') return 'handed back to the verdict'
  return 'set aside'
}

/** One sentence: 'Ruling by avocet: confirmed as B. “The arc is real.”' */
export function describeRuling(ruling: {
  by: string
  outcome: RulingOutcome
  grade: 'A' | 'B' | 'C' | null
  reason: string
}): string {
  return `Ruling by ${ruling.by}: ${describeOutcome(ruling)}. “${ruling.reason}”`
}
