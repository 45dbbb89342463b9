import { z } from 'zod'
import { plainText } from '@/lib/platform/problems/plain-text'

export const WIDEST_ARCSEC = 600

export const RadiusArcsec = z.coerce
  .number('Give the radius in arcseconds, such as 2.')
  .positive('The radius is larger than 0.')
  .max(WIDEST_ARCSEC, `The radius is at most ${WIDEST_ARCSEC} arcseconds.`)

const text = (what: string, missing: string, most: number) =>
  plainText(what).pipe(z.string().min(1, missing).max(most, `${what} has at most ${most} characters.`))

/** What a lead tells of a list, whatever its file says. */
export const ListDetails = z.object({
  name: text('The name', 'Name the list as it is to be read: known as … of this list.', 120),
  source: text('The source', 'Say where the list comes from: a paper, a survey, a service.', 300),
  listDate: text('The date', 'Say of when the list is: a date, an epoch, a release.', 80),
  radiusArcsec: RadiusArcsec,
  keepsOutOfNew: z.boolean(),
})
export type ListDetails = z.output<typeof ListDetails>

/** @throws ZodError with the faults by field */
export function parseDetailsForm(form: FormData): ListDetails {
  const { keepsOutOfNew, ...values } = Object.fromEntries(form) as Record<string, unknown>
  return ListDetails.parse({ ...values, keepsOutOfNew: keepsOutOfNew === 'on' })
}
