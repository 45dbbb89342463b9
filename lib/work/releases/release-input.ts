import { z } from 'zod'
import { LICENCES } from './licences'

/** What people may have typed stays as it is but for blanks at the ends; control characters would break the files. */
const words = (most: number, empty: string) =>
  z
    .string()
    .transform((text) => text.replaceAll('\r\n', '\n').trim())
    .pipe(
      z
        .string()
        .min(1, empty)
        .max(most, `Keep it to ${most} characters.`)
        .refine((text) => !/[\u0000-\u0008\u000b-\u001f\u007f]/.test(text), 'Take out the control characters.'),
    )

const line = (most: number, empty: string) =>
  words(most, empty).refine((text) => !text.includes('\n'), 'Write it in one line.')

const ticked = (sentence: string) =>
  z
    .union([z.boolean(), z.literal('on')])
    // A form leaves an empty tick out, and what is wrong with an optional key that is left out is not told.
    .default(false)
    .refine((value) => value === true || value === 'on', sentence)

export const AUTHORS_MOST = 500

/** The form that publishes. Which kind asks for what is checked together at the end. */
export const ReleaseInput = z
  .object({
    kind: z.enum(['release', 'erratum', 'retraction']),
    /** Number of the release that is corrected or withdrawn. */
    corrects: z.coerce.number().int().min(1).optional().catch(undefined),
    statement: z.string().optional(),
    title: line(300, 'Give the release a title.'),
    description: words(10_000, 'Say in a few sentences what this catalogue is.'),
    authors: words(20_000, 'Name at least one author, a person or a group, one a line.').refine(
      (text) => text.split('\n').length <= AUTHORS_MOST,
      `Keep it to ${AUTHORS_MOST} lines; a collaboration is one line.`,
    ),
    licence: z.enum(['words', ...LICENCES.map(({ id }) => id)], 'Choose a licence.'),
    licenceWords: z.string().optional(),
    publisher: line(300, 'Say who publishes it: a survey, an institute, an archive.'),
    year: z.coerce
      .number({ message: 'Give the year as four digits.' })
      .int('Give the year as four digits.')
      .min(1900, 'Give the year as four digits.')
      .max(9999, 'Give the year as four digits.'),
    howToCite: z.string().optional(),
    emptyIsMeant: z
      .union([z.boolean(), z.literal('on')])
      .optional()
      .transform((value) => value === true || value === 'on'),
    cautionsRead: ticked('Tick that you have read both cautions: they travel in the files.'),
  })
  .superRefine((input, context) => {
    const refuse = (path: string, message: string) => context.addIssue({ code: 'custom', path: [path], message })
    if (input.kind !== 'release') {
      if (input.corrects === undefined) refuse('corrects', 'Choose the release that this is about.')
      const parsed = words(4_000, 'Say what was wrong with it; this stands on its page.').safeParse(
        input.statement ?? '',
      )
      if (!parsed.success) refuse('statement', parsed.error.issues[0].message)
    }
    if (input.licence === 'words') {
      const parsed = words(2_000, 'Write the licence, or choose one of the list.').safeParse(input.licenceWords ?? '')
      if (!parsed.success) refuse('licenceWords', parsed.error.issues[0].message)
    }
    const parsed = words(1_000, '-').safeParse(input.howToCite ?? '')
    if (!parsed.success && (input.howToCite ?? '').trim() !== '') refuse('howToCite', parsed.error.issues[0].message)
  })
  .transform(({ licenceWords, cautionsRead: _read, ...input }) => ({
    ...input,
    statement: input.kind === 'release' ? null : input.statement!.replaceAll('\r\n', '\n').trim(),
    corrects: input.kind === 'release' ? null : input.corrects!,
    licence: input.licence === 'words' ? licenceWords!.replaceAll('\r\n', '\n').trim() : input.licence,
    authors: input.authors
      .split('\n')
      .map((author) => author.trim())
      .filter(Boolean)
      .join('\n'),
    howToCite: input.howToCite?.replaceAll('\r\n', '\n').trim() || null,
  }))
export type ReleaseInput = z.input<typeof ReleaseInput>
export type ReleaseWanted = z.output<typeof ReleaseInput>

/** Where nothing else is asked for. */
export function usualCitation(release: {
  authors: string
  year: number
  title: string
  number: number
  publisher: string
}): string {
  const authors = release.authors.split('\n')
  const names = authors.length > 4 ? `${authors[0]} and ${authors.length - 1} others` : authors.join('; ')
  return `${names} (${release.year}). ${release.title}. Release ${release.number}. ${release.publisher}. Data set.`
}
