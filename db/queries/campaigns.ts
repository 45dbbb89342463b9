import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { Campaign, MeanParameters, RecipeRow, ReliabilityParameters, Rule } from '../schema/campaigns'
import type { Role } from '../schema/people'
import { toJson } from '../schema/values'
import { lookSums } from './overview'

export async function insertCampaign(
  db: Kysely<DB>,
  campaign: {
    slug: string
    name: string
    survey: string
    acronym: string
    bands: string[]
    namePattern: string | null
    createdBy: number
    now: string
  },
): Promise<Campaign> {
  return db
    .insertInto('campaign')
    .values({
      slug: campaign.slug,
      name: campaign.name,
      survey: campaign.survey,
      acronym: campaign.acronym,
      bands: toJson(campaign.bands),
      name_pattern: campaign.namePattern,
      created_by: campaign.createdBy,
      created_at: campaign.now,
    })
    .returningAll()
    .executeTakeFirstOrThrow()
}

export async function isSlugTaken(db: Kysely<DB>, slug: string): Promise<boolean> {
  return (await db.selectFrom('campaign').select('id').where('slug', '=', slug).executeTakeFirst()) !== undefined
}

export interface CampaignSummary {
  id: number
  slug: string
  name: string
  survey: string
  acronym: string
  role: Role
  usesSheet: 0 | 1
  method: Rule['method']
  /** How many people are to look at each candidate, at most. */
  gradesWanted: number
  candidates: number
  imaged: number
  /** Looks given and wanted at all imaged candidates together, as the overview counts them. */
  looksGiven: number
  looksWanted: number
  /** Candidates that want more looks than they have. */
  looksWaiting: number
  confirmed: number
  split: number
}

/** The campaigns that a person is in, newest first. Calibration candidates are counted only for graders, to whom they are like any other. */
export async function listCampaigns(db: Kysely<DB>, personId: number): Promise<CampaignSummary[]> {
  const wanted = sql<number>`(select grades_wanted from rule where rule.campaign_id = campaign.id order by version desc limit 1)`
  const method = sql<
    Rule['method']
  >`(select method from rule where rule.campaign_id = campaign.id order by version desc limit 1)`
  const looks = lookSums(wanted)
  return db
    .selectFrom('membership')
    .innerJoin('campaign', 'campaign.id', 'membership.campaign_id')
    .leftJoin('candidate', (join) =>
      join
        .onRef('candidate.campaign_id', '=', 'campaign.id')
        .on((e) => e.or([e('candidate.truth', 'is', null), e('membership.role', '=', 'grader')])),
    )
    .leftJoin('ruling', 'ruling.id', 'candidate.ruling_id')
    .select([
      'campaign.id',
      'campaign.slug',
      'campaign.name',
      'campaign.survey',
      'campaign.acronym',
      'membership.role',
      'campaign.uses_sheet as usesSheet',
    ])
    .select((e) => [
      method.as('method'),
      wanted.as('gradesWanted'),
      e.fn.count<number>('candidate.id').as('candidates'),
      e.fn.count<number>('candidate.imaged_at').as('imaged'),
      looks.given.as('looksGiven'),
      looks.wanted.as('looksWanted'),
      looks.waiting.as('looksWaiting'),
      e.fn.count<number>('candidate.id').filterWhere('candidate.state', '=', 'confirmed').as('confirmed'),
      e.fn.count<number>('candidate.id').filterWhere('candidate.state', '=', 'split').as('split'),
    ])
    .where('membership.person_id', '=', personId)
    .where('membership.ended_at', 'is', null)
    .groupBy('membership.id')
    .orderBy('campaign.id', 'desc')
    .execute()
}

/** The version that is in force. A campaign is made with its first, so there always is one. */
export async function requireRule(db: Kysely<DB>, campaignId: number): Promise<Rule> {
  return db
    .selectFrom('rule')
    .selectAll()
    .where('campaign_id', '=', campaignId)
    .orderBy('version', 'desc')
    .limit(1)
    .executeTakeFirstOrThrow()
}

/** Newest first, each with who made it. */
export async function listRules(db: Kysely<DB>, campaignId: number): Promise<(Rule & { author: string })[]> {
  return db
    .selectFrom('rule')
    .innerJoin('person', 'person.id', 'rule.created_by')
    .selectAll('rule')
    .select('person.name as author')
    .where('campaign_id', '=', campaignId)
    .orderBy('version', 'desc')
    .execute()
}

export async function setLooking(
  db: Kysely<DB>,
  campaignId: number,
  looking: Pick<Campaign, 'queue_order' | 'calibration_share' | 'repeat_share' | 'practice_wanted'>,
): Promise<void> {
  await db.updateTable('campaign').set(looking).where('id', '=', campaignId).execute()
}

export async function setCosmology(
  db: Kysely<DB>,
  campaignId: number,
  cosmology: Pick<Campaign, 'cosmology' | 'hubble_constant' | 'omega_matter'>,
): Promise<void> {
  await db.updateTable('campaign').set(cosmology).where('id', '=', campaignId).execute()
}

export async function setNamePattern(db: Kysely<DB>, campaignId: number, namePattern: string | null): Promise<void> {
  await db.updateTable('campaign').set({ name_pattern: namePattern }).where('id', '=', campaignId).execute()
}

export async function insertRule(
  db: Kysely<DB>,
  rule: {
    campaignId: number
    version: number
    method: Rule['method']
    gradesWanted: number
    leastGrades: number
    parameters: MeanParameters | ReliabilityParameters
    createdBy: number
    now: string
  },
): Promise<number> {
  const row = await db
    .insertInto('rule')
    .values({
      campaign_id: rule.campaignId,
      version: rule.version,
      method: rule.method,
      grades_wanted: rule.gradesWanted,
      least_grades: rule.leastGrades,
      parameters: toJson(rule.parameters),
      created_by: rule.createdBy,
      created_at: rule.now,
    })
    .returning('id')
    .executeTakeFirstOrThrow()
  return row.id
}

/** The recipe in force, by which new stamps are made. */
export async function requireRecipe(db: Kysely<DB>, campaignId: number): Promise<RecipeRow> {
  return db
    .selectFrom('recipe')
    .selectAll()
    .where('campaign_id', '=', campaignId)
    .orderBy('version', 'desc')
    .limit(1)
    .executeTakeFirstOrThrow()
}

export async function insertRecipe(
  db: Kysely<DB>,
  recipe: { campaignId: number; version: number; parameters: string; hash: string; createdBy: number; now: string },
): Promise<number> {
  const row = await db
    .insertInto('recipe')
    .values({
      campaign_id: recipe.campaignId,
      version: recipe.version,
      parameters: recipe.parameters,
      hash: recipe.hash,
      created_by: recipe.createdBy,
      created_at: recipe.now,
    })
    .returning('id')
    .executeTakeFirstOrThrow()
  return row.id
}

export interface CampaignCounts {
  candidates: number
  imaged: number
  open: number
  split: number
  confirmed: number
  setAside: number
}

/** Without calibration candidates. */
export async function countCandidates(
  db: Kysely<DB>,
  campaignId: number,
  withCalibration = false,
): Promise<CampaignCounts> {
  return db
    .selectFrom('candidate')
    .select((e) => [
      e.fn.countAll<number>().as('candidates'),
      e.fn.count<number>('imaged_at').as('imaged'),
      e.fn.countAll<number>().filterWhere('state', '=', 'open').as('open'),
      e.fn.countAll<number>().filterWhere('state', '=', 'split').as('split'),
      e.fn.countAll<number>().filterWhere('state', '=', 'confirmed').as('confirmed'),
      e.fn.countAll<number>().filterWhere('state', '=', 'set aside').as('setAside'),
    ])
    .where('campaign_id', '=', campaignId)
    .$if(!withCalibration, (query) => query.where('truth', 'is', null))
    .executeTakeFirstOrThrow()
}
