import 'server-only'
import type { Kysely } from 'kysely'
import { findRelease } from '@/db/queries/releases'
import type { DB } from '@/db/schema'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { conflict, notFound } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { requestReleaseFiles } from './publish-release'

/** A lead asks for the files of a release once more, after making them failed. @throws Problem 404; 409 `made-already`, `given-up`. */
export async function makeAgain(db: Kysely<DB>, permit: CampaignPermit<'lead'>, number: number): Promise<void> {
  await db.transaction().execute(async (transaction) => {
    const release = await findRelease(transaction, permit.campaign.id, number)
    if (!release) throw notFound('release')
    if (release.made === 1) throw conflict('made-already', `The files of release ${number} are all there.`)
    if (release.givenUpReason !== null) {
      throw conflict('given-up', `Release ${number} was given up. Publish the next one.`)
    }
    await requestReleaseFiles(transaction, permit.campaign.id, release.id)
    await recordEvent(transaction, {
      personId: permit.viewer.id,
      campaignId: permit.campaign.id,
      action: 'releases.files-asked-again',
      subject: `release ${number}`,
    })
  })
}
