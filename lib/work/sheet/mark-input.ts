import { z } from 'zod'

/** The most that lies on one person's sheets: this page, the next, and what waits in a cut network. */
export const MOST_ON_SHEET = 200

const MarkInput = z.strictObject({
  /** Made by the client; a repeated delivery is recognised by it. */
  id: z.string().regex(/^[A-Za-z0-9_-]{8,64}$/, 'The id has 8 to 64 letters, digits, - or _, such as a UUID.'),
  candidate: z.number('The candidate is a number.').int('The candidate is a whole number.').positive(),
  mark: z.enum(['sent on', 'dropped', 'taken back'], 'A mark is sent on, dropped or taken back.'),
})
export type MarkInput = z.output<typeof MarkInput>

export const MarksInput = z.strictObject({
  marks: z.array(MarkInput).min(1, 'Send at least one mark.').max(500, 'Send at most 500 marks at once.'),
})

/** The form of the settings: whether the campaign uses the sheet, and who makes the first pass besides the leads. */
export const SheetSettingsInput = z.object({
  usesSheet: z.boolean(),
  passers: z.array(z.coerce.number().int().positive()).max(200, 'At most 200 people.'),
})
export type SheetSettingsInput = z.output<typeof SheetSettingsInput>
