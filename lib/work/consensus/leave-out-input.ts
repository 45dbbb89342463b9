import { z } from 'zod'
import { plainText } from '@/lib/platform/problems/plain-text'

export const LONGEST_LEAVE_OUT_REASON = 500

/** What a lead decides on a grader's grades: whether they count, and why. */
export const LeaveOutInput = z.object({
  personId: z.coerce.number().int().positive(),
  leftOut: z.boolean(),
  reason: plainText('The reason').pipe(
    z
      .string()
      .min(1, 'Give a reason: it is kept with the decision, and every lead of the campaign can read it.')
      .max(LONGEST_LEAVE_OUT_REASON, `The reason has at most ${LONGEST_LEAVE_OUT_REASON} characters.`),
  ),
})
export type LeaveOutInput = z.output<typeof LeaveOutInput>
