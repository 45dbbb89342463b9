import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { RecipeRow } from '../schema/campaigns'

/** Newest first, each with who made it. */
export async function listRecipes(db: Kysely<DB>, campaignId: number): Promise<(RecipeRow & { author: string })[]> {
  return db
    .selectFrom('recipe')
    .innerJoin('person', 'person.id', 'recipe.created_by')
    .selectAll('recipe')
    .select('person.name as author')
    .where('campaign_id', '=', campaignId)
    .orderBy('version', 'desc')
    .execute()
}

export async function findRecipe(db: Kysely<DB>, campaignId: number, version: number): Promise<RecipeRow | null> {
  const row = await db
    .selectFrom('recipe')
    .selectAll()
    .where('campaign_id', '=', campaignId)
    .where('version', '=', version)
    .executeTakeFirst()
  return row ?? null
}

/** Ids of the campaigns whose recipe in force is of a drawing below this one. */
export async function listCampaignsDrawnBefore(db: Kysely<DB>, drawing: number): Promise<number[]> {
  const rows = await db
    .selectFrom('recipe')
    .select('campaign_id')
    .where('version', '=', (e) =>
      e
        .selectFrom('recipe as newest')
        .select((n) => n.fn.max('newest.version').as('version'))
        .whereRef('newest.campaign_id', '=', 'recipe.campaign_id'),
    )
    .where(sql<number>`json_extract(recipe.parameters, '$.version')`, '<', drawing)
    .orderBy('campaign_id')
    .execute()
  return rows.map(({ campaign_id }) => campaign_id)
}

export async function listRecipesById(db: Kysely<DB>, ids: readonly number[]): Promise<RecipeRow[]> {
  if (ids.length === 0) return []
  return db.selectFrom('recipe').selectAll().where('id', 'in', ids).execute()
}

/** The recipe of the newest stamps of a candidate, null where it has none. */
export async function findRecipeOfStamps(db: Kysely<DB>, candidateId: number): Promise<number | null> {
  const row = await db
    .selectFrom('stamp')
    .select((e) => e.fn.max<number | null>('recipe_id').as('id'))
    .where('candidate_id', '=', candidateId)
    .executeTakeFirst()
  return row?.id ?? null
}

/** Candidates that have planes, and how many of them have stamps by this recipe. */
export async function countImagedBy(
  db: Kysely<DB>,
  campaignId: number,
  recipeId: number,
): Promise<{ candidates: number; imaged: number }> {
  const hasStamps = sql<number>`exists (select 1 from stamp where stamp.candidate_id = candidate.id and stamp.recipe_id = ${recipeId})`
  return db
    .selectFrom('candidate')
    .select((e) => [
      e.fn.countAll<number>().as('candidates'),
      sql<number>`coalesce(sum(${hasStamps} and candidate.imaged_at is not null), 0)`.as('imaged'),
    ])
    .where('campaign_id', '=', campaignId)
    .where((e) =>
      e.exists(e.selectFrom('plane').select('plane.id').whereRef('plane.candidate_id', '=', 'candidate.id')),
    )
    .executeTakeFirstOrThrow()
}

export interface SampleRow {
  id: number
  name: string
}

/** Candidates with planes to try a recipe on: those whose name contains a text, else any, drawn by lot. */
export async function listSamples(
  db: Kysely<DB>,
  campaignId: number,
  { name, limit }: { name: string | null; limit: number },
): Promise<SampleRow[]> {
  let query = db
    .selectFrom('candidate')
    .select(['candidate.id', 'candidate.name'])
    .where('candidate.campaign_id', '=', campaignId)
    .where((e) =>
      e.exists(e.selectFrom('plane').select('plane.id').whereRef('plane.candidate_id', '=', 'candidate.id')),
    )
    .limit(limit)
  query =
    name === null
      ? query.orderBy(sql`random()`)
      : query
          .where(sql<boolean>`instr(lower(candidate.name), ${name.toLowerCase()}) > 0`)
          .orderBy(sql`length(candidate.name)`)
          .orderBy('candidate.name')
  return query.execute()
}
