import { z } from 'zod'
import { plainText } from '@/lib/platform/problems/plain-text'
import { CANNOT_JUDGE_REASONS, TAGS } from './tags'

export const MOST_REMARK_CHARACTERS = 2000

/** The body of a grade as it arrives. Unknown fields are refused, so that a misspelt one is not lost in silence. */
export const GradeInput = z
  .strictObject({
    grade: z.enum(['A', 'B', 'C', 'N', 'U'], 'A grade is A, B, C or N, or U for cannot judge.'),
    /** Made by the client; a repeated delivery is recognised by it. */
    id: z
      .string()
      .regex(/^[A-Za-z0-9_-]{8,64}$/, 'The id has 8 to 64 letters, digits, - or _, such as a UUID.')
      .optional(),
    tags: z
      .array(z.enum(TAGS, `A tag is one of: ${TAGS.join(', ')}.`))
      .max(TAGS.length)
      .default([])
      .transform((tags) => TAGS.filter((tag) => tags.includes(tag))),
    remark: plainText('The remark')
      .refine(
        (text) => text.length <= MOST_REMARK_CHARACTERS,
        `A remark has at most ${MOST_REMARK_CHARACTERS} characters.`,
      )
      .nullish()
      .transform((text) => text || null),
    /** The answer to a look that a lead asked for by name: its id as the queue told it, or true for the newest. */
    asked: z
      .union(
        [z.boolean(), z.int().positive()],
        'Send the id of the asked look that this answers, or true for the newest.',
      )
      .default(false),
    /** The answer to a candidate that came back turned, with the turn that the queue told. */
    turned: z
      .number('The turn is the number that the queue told.')
      .int('The turn is the number that the queue told.')
      .min(1, 'A turn is 1 to 7; leave it out where there is none.')
      .max(7, 'A turn is 1 to 7; leave it out where there is none.')
      .nullish()
      .transform((turned) => turned ?? null),
    /** Where the candidate has all its looks by now: true keeps the grade beside them instead of refusing it. */
    late: z.boolean().default(false),
    view: z
      .string()
      .max(40)
      .nullish()
      .transform((key) => key ?? null),
    /** Version of the recipe of the pictures that were judged, as the queue told it. */
    recipe: z
      .number('The recipe is the number of its version.')
      .int('The recipe is the number of its version.')
      .min(1, 'Versions of a recipe count from 1.')
      .nullish()
      .transform((version) => version ?? null),
    seconds: z
      .number('The time taken is a number of seconds.')
      .min(0, 'The time taken is not negative.')
      .max(86_400, 'The time taken is at most 86400 seconds.')
      .nullish()
      .transform((seconds) => seconds ?? null),
    reason: z
      .enum(CANNOT_JUDGE_REASONS, `A reason is one of: ${CANNOT_JUDGE_REASONS.join(', ')}.`)
      .nullish()
      .transform((reason) => reason ?? null),
  })
  .refine(({ grade, reason }) => reason === null || grade === 'U', {
    path: ['reason'],
    message: 'A reason goes with U, cannot judge, only. Use the remark.',
  })
export type GradeInput = z.output<typeof GradeInput>
