import { z } from 'zod'
import { plainText } from '@/lib/platform/problems/plain-text'

export const LONGEST_REASON = 2000

const Reason = plainText('The reason').pipe(
  z
    .string()
    .min(1, 'Give a reason: it is kept with the ruling, and everybody in the campaign can read it.')
    .max(LONGEST_REASON, `The reason has at most ${LONGEST_REASON} characters.`),
)

/** What a lead can decide: one of the candidate's ends, more looks, or to let the verdict stand. */
export const RulingInput = z
  .object({
    outcome: z.enum(['confirmed', 'set aside', 'open', 'by verdict'], 'Choose what to rule.'),
    grade: z.enum(['A', 'B', 'C'], 'A lens is confirmed as A, B or C.').nullable().default(null),
    reason: Reason,
    /** The newest ruling that the lead has seen, so that nobody overrules unseen; left out: not checked. */
    lastRulingSeen: z.int().positive().nullable().optional(),
  })
  .superRefine((ruling, context) => {
    const needsGrade = ruling.outcome === 'confirmed'
    if (needsGrade === (ruling.grade !== null)) return
    const message = needsGrade
      ? 'Say as which grade the candidate is confirmed: A, B or C.'
      : 'Only a confirmed candidate gets a grade.'
    context.addIssue({ code: 'custom', path: ['outcome'], message })
  })
export type RulingInput = z.output<typeof RulingInput>

/** The values of the form's one choice, each an outcome with its grade. */
const CHOICES = {
  'confirmed-A': { outcome: 'confirmed', grade: 'A' },
  'confirmed-B': { outcome: 'confirmed', grade: 'B' },
  'confirmed-C': { outcome: 'confirmed', grade: 'C' },
  'set-aside': { outcome: 'set aside', grade: null },
  open: { outcome: 'open', grade: null },
  'by-verdict': { outcome: 'by verdict', grade: null },
} as const
export type RulingChoice = keyof typeof CHOICES

const RulingForm = z
  .object({
    choice: z.enum(Object.keys(CHOICES) as RulingChoice[], 'Choose what to rule.'),
    reason: Reason,
    /** The id of the newest ruling on the page; empty for none. */
    lastRuling: z.string().regex(/^\d*$/),
  })
  .transform(({ choice, reason, lastRuling }): RulingInput => {
    return { ...CHOICES[choice], reason, lastRulingSeen: lastRuling === '' ? null : Number(lastRuling) }
  })

/** @throws ZodError with the faults of `choice` and `reason`. */
export function parseRulingForm(form: FormData): RulingInput {
  return RulingForm.parse(Object.fromEntries(form))
}
