import 'server-only'
import { createHash } from 'node:crypto'
import type { Kysely } from 'kysely'
import { insertCampaign, insertRecipe, insertRule, isSlugTaken } from '@/db/queries/campaigns'
import { leadsSomeCampaign, upsertMembership } from '@/db/queries/people'
import type { DB } from '@/db/schema'
import type { Campaign } from '@/db/schema/campaigns'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { forbidden, signInNeeded } from '@/lib/platform/problems/problem'
import { canonicalRecipe, defaultRecipe } from '@/lib/science/imaging/recipe'
import type { Viewer } from '@/lib/work/people/viewer'
import type { CampaignInput } from './campaign-input'
import { ruleRowOf, type RuleInput } from './rule-input'

/** Administrators, and whoever leads a campaign already. */
export async function mayCreateCampaign(db: Kysely<DB>, viewer: Viewer): Promise<boolean> {
  return viewer.isAdmin || leadsSomeCampaign(db, viewer.id)
}

function slugOf(name: string): string {
  const ascii = name.normalize('NFKD').replace(/[^\x00-\x7f]/g, '')
  const slug = ascii
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '-')
    .replace(/^-+|-+$/g, '')
  return slug.slice(0, 60) || 'campaign'
}

async function freeSlug(db: Kysely<DB>, name: string): Promise<string> {
  const base = slugOf(name)
  for (let number = 1; ; number++) {
    const slug = number === 1 ? base : `${base}-${number}`
    if (!(await isSlugTaken(db, slug))) return slug
  }
}

/** Makes the campaign with its first rule and recipe; whoever makes it leads it. */
export async function createCampaign(
  db: Kysely<DB>,
  viewer: Viewer | null,
  input: CampaignInput,
  rule: RuleInput,
): Promise<Campaign> {
  if (!viewer) throw signInNeeded()
  if (!(await mayCreateCampaign(db, viewer))) {
    throw forbidden('A campaign is made by an administrator or by somebody who leads one already. Ask one of them.')
  }
  return db.transaction().execute(async (transaction) => {
    const now = isoTime()
    const slug = await freeSlug(transaction, input.name)
    const campaign = await insertCampaign(transaction, { ...input, slug, createdBy: viewer.id, now })
    await insertRule(transaction, {
      campaignId: campaign.id,
      version: 1,
      ...ruleRowOf(rule),
      createdBy: viewer.id,
      now,
    })
    const recipe = canonicalRecipe(defaultRecipe(input.bands))
    await insertRecipe(transaction, {
      campaignId: campaign.id,
      version: 1,
      parameters: recipe,
      hash: createHash('sha256').update(recipe).digest('hex'),
      createdBy: viewer.id,
      now,
    })
    await upsertMembership(transaction, {
      campaignId: campaign.id,
      personId: viewer.id,
      role: 'lead',
      pseudonym: 'G01',
      now,
    })
    await recordEvent(transaction, {
      personId: viewer.id,
      campaignId: campaign.id,
      action: 'campaign.created',
      subject: slug,
    })
    return campaign
  })
}
