import 'server-only'
import type { Kysely } from 'kysely'
import { z } from 'zod'
import { findRelease, insertGivenUp } from '@/db/queries/releases'
import type { DB } from '@/db/schema'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { conflict, notFound } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'

export const GiveUpInput = z.object({
  reason: z
    .string()
    .trim()
    .min(1, 'Say why it is given up; that stays with it.')
    .max(2000, 'Say it in 2,000 characters.'),
})
export type GiveUpInput = z.input<typeof GiveUpInput>

/**
 * A lead leaves a release behind whose files cannot be made: it stands in the list with the reason, is never opened, and the next one can
 * be published.
 * @throws Problem 404; 409 `made-already`, `given-up`. ZodError.
 */
export async function giveUpRelease(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  number: number,
  input: GiveUpInput,
): Promise<void> {
  const { reason } = GiveUpInput.parse(input)
  const { campaign, viewer } = permit
  await db.transaction().execute(async (transaction) => {
    const release = await findRelease(transaction, campaign.id, number)
    if (!release) throw notFound('release')
    if (release.made === 1) {
      throw conflict(
        'made-already',
        `The files of release ${number} are all there. What is wrong with it is withdrawn.`,
      )
    }
    if (release.givenUpReason !== null) throw conflict('given-up', `Release ${number} was given up already.`)
    await insertGivenUp(transaction, { releaseId: release.id, reason, by: viewer.id, now: isoTime() })
    await recordEvent(transaction, {
      personId: viewer.id,
      campaignId: campaign.id,
      action: 'releases.given-up',
      subject: `release ${number}`,
      detail: { reason },
    })
  })
}
