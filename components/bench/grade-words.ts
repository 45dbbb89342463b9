import type { GradeLetter } from '@/db/schema/grading'

/** The rungs of the ladder, surest first, then what is no rung. */
export const RUNGS: readonly {
  letter: GradeLetter
  name: string
  means: string
  ink: string
  bar: string
}[] = [
  { letter: 'A', name: 'Sure', means: 'nothing else would do this', ink: 'text-letter-a', bar: 'bg-grade-a' },
  { letter: 'B', name: 'Probable', means: 'a lens explains it best', ink: 'text-letter-b', bar: 'bg-grade-b' },
  { letter: 'C', name: 'Possible', means: 'worth keeping in mind', ink: 'text-letter-c', bar: 'bg-grade-c' },
  { letter: 'N', name: 'Not a lens', means: 'something else explains it', ink: 'text-letter-n', bar: 'bg-grade-n' },
]

export const CANNOT_JUDGE = 'Cannot judge'

export function gradeName(letter: GradeLetter): string {
  return RUNGS.find((rung) => rung.letter === letter)?.name ?? CANNOT_JUDGE
}
