import { z } from 'zod'
import { plainText } from '@/lib/platform/problems/plain-text'

export const LONGEST_MERGE_REASON = 1000
export const MOST_MERGED = 50

export const MergeReason = plainText('The reason').pipe(
  z
    .string()
    .min(1, 'Give a reason: it is kept with the decision, and everybody who may see both can read it.')
    .max(LONGEST_MERGE_REASON, `The reason has at most ${LONGEST_MERGE_REASON} characters.`),
)

const Id = z.coerce.number().int().positive()
/** Ids with commas between, as a form sends them, or a list of them. */
const ids = (least: number, sentence: string) =>
  z
    .preprocess(
      (value) => (typeof value === 'string' ? value.split(',').filter((part) => part !== '') : value),
      z.array(Id),
    )
    .pipe(z.array(z.number()).min(least, sentence).max(MOST_MERGED, `Choose at most ${MOST_MERGED} at a time.`))

/** Candidates that are one object, and which of them is kept. */
export const MergeInput = z.object({
  kept: Id,
  merged: ids(1, 'Choose at least one candidate to be merged into the kept one.'),
  reason: MergeReason,
})
export type MergeInput = z.output<typeof MergeInput>

/** Candidates that are close and not one object. */
export const DifferInput = z.object({
  members: ids(2, 'Choose at least two candidates that are different objects.'),
  reason: MergeReason,
})
export type DifferInput = z.output<typeof DifferInput>

/** Which merged candidate is parted from the one that was kept. */
export const PartInput = z.object({ merged: Id, reason: MergeReason })

/** What a lead says of a candidate and a known object beside it. */
export const ObjectInput = z.object({
  list: Id,
  row: Id,
  decision: z.enum(['same', 'different', 'undecided']),
  reason: MergeReason,
})
export type ObjectInput = z.output<typeof ObjectInput>
