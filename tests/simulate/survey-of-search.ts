/** A simulated search as a campaign in a database in memory: its candidates, calibration stamps, graders and rule. */
import SQLite from 'better-sqlite3'
import { Kysely, SqliteDialect } from 'kysely'
import { migrateToLatest } from '@/db/migrator'
import { queueSecret } from '@/db/queries/mixing'
import { insertPerson, upsertMembership } from '@/db/queries/people'
import type { DB } from '@/db/schema'
import type { Campaign } from '@/db/schema/campaigns'
import type { SimulatedSearch } from '@/lib/science/agreement/simulated-search'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { CampaignInput } from '@/lib/work/campaigns/campaign-input'
import { createCampaign } from '@/lib/work/campaigns/create-campaign'
import type { RuleInput } from '@/lib/work/campaigns/rule-input'
import { permitCampaign, type CampaignPermit } from '@/lib/work/people/permission'
import type { Viewer } from '@/lib/work/people/viewer'

const START = '2026-01-01T00:00:00.000Z'
const ROWS_A_STATEMENT = 1000

/** In memory, migrated. Statements are prepared once: a simulation runs the same few dozen of them half a million times. */
async function openMemory(): Promise<Kysely<DB>> {
  const sqlite = new SQLite(':memory:')
  sqlite.pragma('foreign_keys = ON')
  const prepared = new Map<string, SQLite.Statement>()
  const database = {
    prepare(text: string) {
      const statement = prepared.get(text) ?? sqlite.prepare(text)
      prepared.set(text, statement)
      return statement
    },
    close: () => sqlite.close(),
  }
  const db = new Kysely<DB>({ dialect: new SqliteDialect({ database }) })
  await migrateToLatest(db)
  // Statements of before the last migration do not know the tables of after it.
  prepared.clear()
  return db
}

export interface SearchSite {
  db: Kysely<DB>
  lead: CampaignPermit<'lead'>
  graders: CampaignPermit<'grade'>[]
  /** number of the stamp in the search, by candidate id */
  stampOf: Map<number, number>
}

/** Calibration stamps stand among the candidates in a drawn order, so that no id tells them apart. Nothing has pictures. */
export async function openSearch(search: SimulatedSearch, rule: RuleInput): Promise<SearchSite> {
  const db = await openMemory()
  // The places of calibration stamps are drawn with the site's secret: here it follows from the seed.
  await queueSecret(db, () => `simulated ${search.scenario.seed}`)
  const leader = await addPerson(db, 'avocet', true)
  const input = CampaignInput.parse({
    name: 'Simulated',
    survey: 'Saltmarsh Wide Survey',
    acronym: 'SWS',
    bands: 'g r i',
  })
  const campaign = await createCampaign(db, leader, input, rule)
  const graders: CampaignPermit<'grade'>[] = []
  for (let grader = 0; grader < search.scenario.graders; grader++) {
    const person = await addPerson(db, `grader${grader}`)
    const pseudonym = `G${String(grader + 2).padStart(2, '0')}`
    await upsertMembership(db, { campaignId: campaign.id, personId: person.id, role: 'grader', pseudonym, now: START })
    graders.push(await permitCampaign(db, person, campaign.slug, 'grade'))
  }
  const lead = await permitCampaign(db, leader, campaign.slug, 'lead')
  return { db, lead, graders, stampOf: await addStamps(db, campaign, search) }
}

async function addPerson(db: Kysely<DB>, name: string, isAdmin = false): Promise<Viewer> {
  const email = `${name}@saltmarsh.test`
  const id = await insertPerson(db, { email, name, passwordHash: null, isAdmin, now: START })
  return { id, name, email, isAdmin }
}

async function addStamps(db: Kysely<DB>, campaign: Campaign, search: SimulatedSearch): Promise<Map<number, number>> {
  const { scenario, isLens } = search
  const random = new SeededRandom(scenario.seed + 3)
  const order = Array.from(isLens, (_, stamp) => stamp)
  for (let at = order.length - 1; at > 0; at--) {
    const other = random.integer(0, at)
    ;[order[at], order[other]] = [order[other], order[at]]
  }
  const stampOf = new Map<number, number>()
  for (let from = 0; from < order.length; from += ROWS_A_STATEMENT) {
    const part = order.slice(from, from + ROWS_A_STATEMENT)
    const rows = await db
      .insertInto('candidate')
      .values(
        part.map((stamp, at) => ({
          campaign_id: campaign.id,
          name: `SIM${String(from + at).padStart(6, '0')}`,
          ra_deg: 150 + (from + at) / 1e4,
          dec_deg: 2,
          pixel_scale_arcsec: 0.2,
          score: null,
          lens_redshift: null,
          source_redshift: null,
          // In the order of their numbers, so that the same seed gives the same search.
          spread: from + at,
          truth: stamp < scenario.candidates ? null : isLens[stamp] ? ('lens' as const) : ('not a lens' as const),
          imaged_at: START,
          state_cause: null,
          state_cause_id: null,
          state_since: START,
          verdict_id: null,
          ruling_id: null,
          created_at: START,
        })),
      )
      .returning(['id', 'name'])
      .execute()
    for (const { id, name } of rows) stampOf.set(id, order[Number(name.slice(3))])
  }
  return stampOf
}
