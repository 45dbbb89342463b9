import { z } from 'zod'
import { plainText } from '@/lib/platform/problems/plain-text'

export const LONGEST_NOTE = 500

const People = z
  .array(z.coerce.number().int().positive())
  .min(1, 'Choose whom you ask.')
  .max(50, 'Ask at most 50 people at once.')
  .transform((people) => [...new Set(people)])

const Note = plainText('The note')
  .refine((text) => text.length <= LONGEST_NOTE, `The note has at most ${LONGEST_NOTE} characters.`)
  .nullish()
  .transform((text) => text || null)

/** Whom a lead asks for another look, and what they say to it. */
export const AskInput = z.object({ people: People, note: Note })
export type AskInput = z.output<typeof AskInput>

/** @throws ZodError with the faults of `people` and `note`. */
export function parseAskForm(form: FormData): AskInput {
  return AskInput.parse({ people: form.getAll('people'), note: form.get('note') })
}
