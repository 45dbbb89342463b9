import type { RefusedGrade } from './grade-outbox'

/** '2 grades were not taken', '1 grade came with a note', both; empty for none. */
export function refusedInWords(refused: readonly RefusedGrade[]): string {
  const noted = refused.filter(({ taken }) => taken).length
  const not = refused.length - noted
  const parts = [
    ...(not > 0 ? [not === 1 ? '1 grade was not taken' : `${not} grades were not taken`] : []),
    ...(noted > 0 ? [noted === 1 ? '1 came with a note' : `${noted} came with a note`] : []),
  ]
  return parts.join(', ')
}
