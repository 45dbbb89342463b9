import 'server-only'
import type { Kysely } from 'kysely'
import { listMembers } from '@/db/queries/people'
import { listPassers, setPassers, setUsesSheet } from '@/db/queries/sheet'
import type { DB } from '@/db/schema'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { requestConsensus } from '@/lib/platform/jobs/request-consensus'
import { invalid } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'
import type { SheetSettingsInput } from './mark-input'

export interface SheetSettings {
  usesSheet: boolean
  /** Graders whom a lead may pick for the first pass, and whether they are. */
  graders: { personId: number; name: string; passes: boolean }[]
}

export async function sheetSettings(db: Kysely<DB>, { campaign }: CampaignPermit<'lead'>): Promise<SheetSettings> {
  const passers = new Set(await listPassers(db, campaign.id))
  const members = await listMembers(db, campaign.id)
  return {
    usesSheet: campaign.uses_sheet === 1,
    graders: members
      .filter(({ role }) => role === 'grader')
      .map(({ personId, name }) => ({ personId, name, passes: passers.has(personId) })),
  }
}

/**
 * Turns the first pass on or off and picks who makes it. What has been graded is at the bench whatever is chosen; marks stay, and hold
 * again when it is turned on again. The consensus follows, because what is not sent on is set aside.
 */
export async function changeSheet(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  { usesSheet, passers }: SheetSettingsInput,
): Promise<void> {
  const { campaign, viewer } = permit
  await db.transaction().execute(async (transaction) => {
    const graders = (await sheetSettings(transaction, permit)).graders.map(({ personId }) => personId)
    if (!passers.every((id) => graders.includes(id))) {
      const reason = 'Only graders of this campaign can be picked for the first pass. Load the page again.'
      throw invalid(reason, [{ name: 'passers', reason }])
    }
    await setUsesSheet(transaction, campaign.id, usesSheet)
    await setPassers(transaction, campaign.id, passers)
    if (usesSheet !== (campaign.uses_sheet === 1)) await requestConsensus(transaction, campaign.id)
    await recordEvent(transaction, {
      personId: viewer.id,
      campaignId: campaign.id,
      action: 'campaigns.first-pass-changed',
      detail: { usesSheet, passers },
    })
  })
}
