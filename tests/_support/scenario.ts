import type { Kysely } from 'kysely'
import { openMemoryDatabase } from '@/db/connection'
import { insertPerson, upsertMembership } from '@/db/queries/people'
import type { DB } from '@/db/schema'
import type { Campaign } from '@/db/schema/campaigns'
import type { Role } from '@/db/schema/people'
import { CampaignInput } from '@/lib/work/campaigns/campaign-input'
import { createCampaign } from '@/lib/work/campaigns/create-campaign'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { permitCampaign, type Capability, type CampaignPermit } from '@/lib/work/people/permission'
import type { Viewer } from '@/lib/work/people/viewer'

/** A migrated database in memory with a campaign of bands g, r, i and people in every role, for tests of use cases. */
export interface Scenario {
  db: Kysely<DB>
  campaign: Campaign
  lead: Viewer
  graders: Viewer[]
  reader: Viewer
  /** Has an account and leads another campaign, but is not in this one. */
  stranger: Viewer
  otherCampaign: Campaign
  permit<C extends Capability>(viewer: Viewer, capability: C): Promise<CampaignPermit<C>>
}

const NOW = '2026-01-01T00:00:00.000Z'

async function addPerson(db: Kysely<DB>, name: string, isAdmin = false): Promise<Viewer> {
  const email = `${name}@saltmarsh.test`
  const id = await insertPerson(db, { email, name, passwordHash: null, isAdmin, now: NOW })
  return { id, name, email, isAdmin }
}

export async function addMember(
  db: Kysely<DB>,
  campaign: Campaign,
  person: Viewer,
  role: Role,
  pseudonym: string,
): Promise<void> {
  await upsertMembership(db, { campaignId: campaign.id, personId: person.id, role, pseudonym, now: NOW })
}

export async function makeScenario(rule: Partial<RuleInput> = {}, graderCount = 4): Promise<Scenario> {
  const db = await openMemoryDatabase()
  const lead = await addPerson(db, 'avocet', true)
  const names = [
    'curlew',
    'dunlin',
    'plover',
    'whimbrel',
    'godwit',
    'knot',
    'redshank',
    'ruff',
    'sanderling',
    'turnstone',
  ]
  const graders: Viewer[] = []
  for (const name of names.slice(0, graderCount)) graders.push(await addPerson(db, name))
  const reader = await addPerson(db, 'egret')
  const stranger = await addPerson(db, 'oystercatcher', true)
  const input = CampaignInput.parse({
    name: 'North field',
    survey: 'Saltmarsh Wide Survey',
    acronym: 'SWS',
    bands: 'g r i',
  })
  const campaign = await createCampaign(db, lead, input, RuleInput.parse(rule))
  const other = CampaignInput.parse({
    name: 'South field',
    survey: 'Saltmarsh Wide Survey',
    acronym: 'SWS',
    bands: 'g r i',
  })
  const otherCampaign = await createCampaign(db, stranger, other, RuleInput.parse({}))
  for (const [index, grader] of graders.entries()) {
    await addMember(db, campaign, grader, 'grader', `G${String(index + 2).padStart(2, '0')}`)
  }
  await addMember(db, campaign, reader, 'viewer', 'G90')
  return {
    db,
    campaign,
    lead,
    graders,
    reader,
    stranger,
    otherCampaign,
    permit: (viewer, capability) => permitCampaign(db, viewer, campaign.slug, capability),
  }
}

let made = 0

/** A candidate that the queue may lend out, without files behind it. */
export async function addImagedCandidate(
  db: Kysely<DB>,
  campaign: Campaign,
  name: string,
  position: { raDeg: number; decDeg: number } = { raDeg: 150.1, decDeg: 2.2 },
  /** In the order in which they are made, so that tests know their queue; 'drawn' as it is outside of them. */
  spread: 'rising' | 'drawn' = 'rising',
): Promise<number> {
  const row = await db
    .insertInto('candidate')
    .values({
      campaign_id: campaign.id,
      name,
      ra_deg: position.raDeg,
      dec_deg: position.decDeg,
      pixel_scale_arcsec: 0.2,
      score: null,
      lens_redshift: null,
      source_redshift: null,
      truth: null,
      ...(spread === 'rising' ? { spread: ++made } : {}),
      imaged_at: NOW,
      state_cause: null,
      state_cause_id: null,
      state_since: NOW,
      verdict_id: null,
      ruling_id: null,
      created_at: NOW,
    })
    .returning('id')
    .executeTakeFirstOrThrow()
  return row.id
}
