import 'server-only'
import type { Kysely } from 'kysely'
import { z } from 'zod'
import { findRelease, insertReleaseAccess } from '@/db/queries/releases'
import type { DB } from '@/db/schema'
import type { ReleaseAccess } from '@/db/schema/releases'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { conflict, notFound } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { hashSecret, newToken } from '@/lib/work/people/secrets'

export const AccessInput = z.object({
  access: z.enum(['private', 'link', 'public'], 'Choose who may read it: private, link or public.'),
  acronymRegistered: z
    .union([z.boolean(), z.literal('on')])
    .optional()
    .transform((value) => value === true || value === 'on'),
})
export type AccessInput = z.input<typeof AccessInput>

export interface AccessAnswer {
  access: ReleaseAccess
  /** Of a link: its secret, told this once. A new one ends the old one. */
  token: string | null
}

/**
 * A lead opens a release or closes it again. Every change is kept. Before it is public, the lead says that the acronym of its
 * designations is registered.
 * @throws Problem 404 no such release here; 409 `release-being-made`, `acronym-not-registered`. ZodError.
 */
export async function changeAccess(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  number: number,
  input: AccessInput,
): Promise<AccessAnswer> {
  const { access, acronymRegistered } = AccessInput.parse(input)
  return db.transaction().execute(async (transaction) => {
    const release = await findRelease(transaction, permit.campaign.id, number)
    if (!release) throw notFound('release')
    if (release.made === 0) {
      const sentence = `The files of release ${number} are still being made. It can be opened when they are there.`
      throw conflict('release-being-made', sentence)
    }
    if (access === 'public' && release.entries > 0 && !acronymRegistered) {
      throw conflict(
        'acronym-not-registered',
        `By the IAU rule the acronym ${release.acronym} must be registered before designations made with it are published. Say ` +
          'that it is, or leave the release closed.',
      )
    }
    const token = access === 'link' ? newToken() : null
    await insertReleaseAccess(transaction, {
      releaseId: release.id,
      access,
      tokenHash: token && hashSecret(token),
      changedBy: permit.viewer.id,
      now: isoTime(),
    })
    await recordEvent(transaction, {
      personId: permit.viewer.id,
      campaignId: permit.campaign.id,
      action: 'releases.access-changed',
      subject: `release ${number}`,
      detail: { from: release.access, to: access },
    })
    return { access, token }
  })
}
