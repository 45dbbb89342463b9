import 'server-only'
import type { Kysely } from 'kysely'
import { setCosmology } from '@/db/queries/campaigns'
import type { DB } from '@/db/schema'
import { recordEvent } from '@/lib/platform/audit/record-event'
import type { CampaignPermit } from '@/lib/work/people/permission'
import type { CosmologyInput } from './cosmology-input'

/** For measurements from now on; each one that is saved keeps the cosmology that it was worked out in. */
export async function changeCosmology(
  db: Kysely<DB>,
  { campaign, viewer }: CampaignPermit<'lead'>,
  input: CosmologyInput,
): Promise<void> {
  const { cosmology, hubble_constant, omega_matter } = campaign
  const from = { cosmology, hubble_constant, omega_matter }
  const to =
    input.cosmology === 'Planck 2018'
      ? { ...from, cosmology: input.cosmology }
      : { cosmology: input.cosmology, hubble_constant: input.hubbleConstant, omega_matter: input.omegaMatter }
  await db.transaction().execute(async (transaction) => {
    await setCosmology(transaction, campaign.id, to)
    await recordEvent(transaction, {
      personId: viewer.id,
      campaignId: campaign.id,
      action: 'campaigns.cosmology-changed',
      detail: { from, to },
    })
  })
}
