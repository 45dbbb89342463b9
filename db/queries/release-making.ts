import { sql, type Kysely, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import type { RulingOutcome } from '../schema/consensus'
import type { GradeLetter, GradeRow } from '../schema/grading'
import type { ReleaseCandidate, ReleaseEntryTable, ReleaseFile, ReleaseTable } from '../schema/releases'
import type { IsoTime, Json } from '../schema/values'
import type { Insertable } from 'kysely'
import { among, inCampaign } from './by-ids'
import { countedAnswers } from './consensus'
import { standingMatch } from './matching'

export async function insertRelease(db: Kysely<DB>, release: Insertable<ReleaseTable>): Promise<number> {
  const { id } = await db.insertInto('release').values(release).returning('id').executeTakeFirstOrThrow()
  return id
}

/** Every judged candidate as it stands now, calibration stamps left out. */
const judged = (campaignId: number) => sql<SqlBool>`candidate.campaign_id = ${campaignId} and candidate.truth is null
  and (candidate.verdict_id is not null or candidate.ruling_id is not null)`

export async function countJudged(
  db: Kysely<DB>,
  campaignId: number,
): Promise<{ state: ReleaseCandidate['state']; count: number }[]> {
  return db
    .selectFrom('candidate')
    .select('state')
    .select((e) => e.fn.countAll<number>().as('count'))
    .where(judged(campaignId))
    .groupBy('state')
    .execute()
}

/** Candidates that are in no file since nobody has judged them, calibration stamps left out. */
export async function countUnjudged(db: Kysely<DB>, campaignId: number): Promise<number> {
  const row = await db
    .selectFrom('candidate')
    .select((e) => e.fn.countAll<number>().as('count'))
    .where('campaign_id', '=', campaignId)
    .where('truth', 'is', null)
    .where('verdict_id', 'is', null)
    .where('ruling_id', 'is', null)
    .where(sql<SqlBool>`not exists (select 1 from grade where grade.candidate_id = candidate.id)`)
    .executeTakeFirstOrThrow()
  return row.count
}

/** What the lists in force know `candidate` as, nearest first, without what a lead has told to differ. */
const knownAs = sql`(select json_group_array(json_object('list', list, 'name', name, 'separationArcsec', separation,
      'keptOutOfNew', json(kept_out))
    order by separation, list_id, row_number)
  from (select l.name as list, o.name, m.separation_arcsec as separation,
      iif(l.keeps_out_of_new = 1, 'true', 'false') as kept_out, m.list_id, m.row_number
    from object_match m join reference_list l on l.id = m.list_id and l.state = 'ready'
      join reference_object o on o.list_id = m.list_id and o.row_number = m.row_number
    where m.candidate_id = candidate.id and ${standingMatch}))`

/** One statement: what it says of 100,000 candidates takes some tenths of a second. */
export async function freezeCandidates(db: Kysely<DB>, campaignId: number, releaseId: number): Promise<void> {
  await sql`
    insert into release_candidate
      (release_id, candidate_id, name, ra_deg, dec_deg, lens_redshift, source_redshift, state, first_pass, verdict_id,
        ruling_id, designation, known_as)
    select ${releaseId}, candidate.id, candidate.name, candidate.ra_deg, candidate.dec_deg, candidate.lens_redshift,
        candidate.source_redshift, candidate.state, candidate.first_pass, candidate.verdict_id, candidate.ruling_id,
        case when candidate.state = 'confirmed' then designation.designation end,
        case when candidate.state = 'confirmed' then ${knownAs} end
      from candidate left join designation on designation.candidate_id = candidate.id
      where ${judged(campaignId)}
      order by candidate.id`.execute(db)
}

/** Confirmed candidates that cannot be published: without a position there is no designation either. */
export async function listConfirmedWithoutPlace(db: Kysely<DB>, campaignId: number): Promise<string[]> {
  const rows = await db
    .selectFrom('candidate')
    .leftJoin('designation', 'designation.candidate_id', 'candidate.id')
    .select('candidate.name')
    .where('candidate.campaign_id', '=', campaignId)
    .where('candidate.state', '=', 'confirmed')
    .where('candidate.truth', 'is', null)
    .where((e) => e.or([e('ra_deg', 'is', null), e('dec_deg', 'is', null), e('designation.designation', 'is', null)]))
    .orderBy('candidate.name')
    .execute()
  return rows.map(({ name }) => name)
}

/** The newest rows of what a release is made of beside its run, and the recipe of its pictures. */
export async function newestOfCampaign(
  db: Kysely<DB>,
  campaignId: number,
): Promise<{ ruling: number; merge: number; measurement: number; recipeHash: string | null }> {
  const newest = async (table: 'merge' | 'measurement') => {
    const row = await db
      .selectFrom(table)
      .select((e) => e.fn.max('id').as('id'))
      .where('campaign_id', '=', campaignId)
      .executeTakeFirst()
    return row?.id ?? 0
  }
  const ruling = await db
    .selectFrom('candidate')
    .select((e) => e.fn.max('ruling_id').as('id'))
    .where('campaign_id', '=', campaignId)
    .executeTakeFirst()
  const recipe = await db
    .selectFrom('recipe')
    .select('hash')
    .where('campaign_id', '=', campaignId)
    .orderBy('version', 'desc')
    .limit(1)
    .executeTakeFirst()
  return {
    ruling: ruling?.id ?? 0,
    merge: await newest('merge'),
    measurement: await newest('measurement'),
    recipeHash: recipe?.hash ?? null,
  }
}

export interface FrozenCandidate extends ReleaseCandidate {
  rulingOutcome: RulingOutcome | null
  rulingGrade: 'A' | 'B' | 'C' | null
  rulingReason: string | null
  ruledBy: string | null
  ruledAt: IsoTime | null
  enteredAt: IsoTime | null
}

/** A page of what was frozen, by candidate, each with its newest ruling of then. */
export async function listFrozen(
  db: Kysely<DB>,
  release: { id: number; campaignId: number; createdAt: IsoTime },
  page: { after: number; limit: number; confirmed?: boolean },
): Promise<FrozenCandidate[]> {
  return db
    .selectFrom('release_candidate')
    .leftJoin('ruling', 'ruling.id', 'release_candidate.ruling_id')
    .leftJoin('membership', (join) =>
      join.onRef('membership.person_id', '=', 'ruling.person_id').on('membership.campaign_id', '=', release.campaignId),
    )
    .selectAll('release_candidate')
    .select([
      'ruling.outcome as rulingOutcome',
      'ruling.grade as rulingGrade',
      'ruling.reason as rulingReason',
      'ruling.created_at as ruledAt',
      'membership.pseudonym as ruledBy',
    ])
    .select((e) =>
      e
        .selectFrom('entry')
        .select('entry.at')
        .whereRef('entry.candidate_id', '=', 'release_candidate.candidate_id')
        .where('entry.event', '=', 'entered')
        .where('entry.at', '<=', release.createdAt)
        .orderBy('entry.id', 'desc')
        .limit(1)
        .as('enteredAt'),
    )
    .where('release_candidate.release_id', '=', release.id)
    .where('release_candidate.candidate_id', '>', page.after)
    .$if(page.confirmed === true, (query) => query.where('release_candidate.state', '=', sql.lit('confirmed')))
    .orderBy('release_candidate.candidate_id')
    .limit(page.limit)
    .execute()
}

export interface ReleasedGrade {
  id: number
  candidateId: number
  by: string
  personId: number
  occasion: GradeRow['occasion']
  grade: GradeLetter
  tags: Json<string[]>
  reason: string | null
  remark: string | null
  replaces: number | null
  givenAt: IsoTime
}

/** Every grade that was given at these candidates up to a grade, corrected ones too; by candidate, pseudonym and time. */
export async function listReleasedGrades(
  db: Kysely<DB>,
  campaignId: number,
  candidateIds: readonly number[],
  upTo: number,
): Promise<ReleasedGrade[]> {
  return db
    .selectFrom('grade')
    .innerJoin('membership', (join) =>
      join
        .onRef('membership.campaign_id', '=', 'grade.campaign_id')
        .onRef('membership.person_id', '=', 'grade.person_id'),
    )
    .select([
      'grade.id',
      'grade.candidate_id as candidateId',
      'grade.person_id as personId',
      'membership.pseudonym as by',
      'grade.occasion',
      'grade.grade',
      'grade.tags',
      'grade.reason',
      'grade.remark',
      'grade.replaces',
      'grade.given_at as givenAt',
    ])
    .where(inCampaign('grade.campaign_id', campaignId))
    .where('grade.candidate_id', 'in', among(candidateIds))
    .where(sql<SqlBool>`+grade.id <= ${upTo}`)
    .orderBy('grade.candidate_id')
    .orderBy('membership.pseudonym')
    .orderBy('grade.id')
    .execute()
}

/** How often each person gave each grade to stamps of each truth: all that leaves of calibration. */
export async function countCalibration(
  db: Kysely<DB>,
  bounds: { campaignId: number; newestGradeId: number; newestCandidateId: number },
): Promise<{ personId: number; truth: 'lens' | 'not a lens'; grade: GradeLetter; count: number }[]> {
  return countedAnswers(db, bounds.newestGradeId)
    .where('grade.candidate_id', 'in', (e) =>
      e
        .selectFrom('candidate')
        .select('candidate.id')
        .where('candidate.campaign_id', '=', bounds.campaignId)
        .where('candidate.truth', 'is not', null)
        .where('candidate.id', '<=', bounds.newestCandidateId),
    )
    .innerJoin('candidate as stamp', 'stamp.id', 'grade.candidate_id')
    .select(['grade.person_id as personId', 'grade.grade'])
    .select(sql<'lens' | 'not a lens'>`stamp.truth`.as('truth'))
    .select((e) => e.fn.countAll<number>().as('count'))
    .groupBy(['grade.person_id', 'stamp.truth', 'grade.grade'])
    .execute()
}

/** The stamps of these candidates by the newest recipe up to that of a hash that made any, each view once. */
export async function listStampsToRelease(
  db: Kysely<DB>,
  { campaignId, recipeHash }: { campaignId: number; recipeHash: string | null },
  candidateIds: readonly number[],
): Promise<{ candidateId: number; recipeId: number; view: string; sha256: string }[]> {
  return db
    .selectFrom('stamp')
    .select(['candidate_id as candidateId', 'recipe_id as recipeId', 'view', 'sha256'])
    .where(inCampaign('stamp.campaign_id', campaignId))
    .where('candidate_id', 'in', among(candidateIds))
    .where('recipe_id', '=', (e) =>
      e
        .selectFrom('stamp as newest')
        .select((n) => n.fn.max('newest.recipe_id').as('id'))
        .whereRef('newest.candidate_id', '=', 'stamp.candidate_id')
        .where('newest.recipe_id', '<=', (n) =>
          n
            .selectFrom('recipe')
            .select((r) => r.fn.max('recipe.id').as('id'))
            .where('recipe.campaign_id', '=', campaignId)
            .where('recipe.hash', '=', recipeHash),
        ),
    )
    .orderBy('candidate_id')
    .orderBy('view')
    .execute()
}

/** Whether entries were added before, as where a process was killed between pages: the last one's row and candidate. */
export async function findLastEntry(
  db: Kysely<DB>,
  releaseId: number,
): Promise<{ rowNumber: number; candidateId: number } | null> {
  const row = await db
    .selectFrom('release_entry')
    .select(['row_number as rowNumber', 'candidate_id as candidateId'])
    .where('release_id', '=', releaseId)
    .orderBy('row_number', 'desc')
    .limit(1)
    .executeTakeFirst()
  return row ?? null
}

/** Keys of entries that are one of these, or one of these with a number behind it. */
export async function listTakenKeys(db: Kysely<DB>, releaseId: number, keys: readonly string[]): Promise<Set<string>> {
  const { rows } = await sql<{ key: string }>`
    select e.entry_key as key from json_each(${JSON.stringify(keys)}) k cross join release_entry e
      where e.release_id = ${releaseId} and e.entry_key = k.value
    union select e.entry_key from json_each(${JSON.stringify(keys)}) k cross join release_entry e
      where e.release_id = ${releaseId} and e.entry_key > k.value || '_' and e.entry_key < k.value || '_:'`.execute(db)
  return new Set(rows.map(({ key }) => key))
}

export async function insertReleaseEntries(
  db: Kysely<DB>,
  entries: readonly Insertable<ReleaseEntryTable>[],
): Promise<void> {
  for (let from = 0; from < entries.length; from += 100) {
    await db
      .insertInto('release_entry')
      .values(entries.slice(from, from + 100))
      .execute()
  }
}

export async function insertReleaseFile(db: Kysely<DB>, file: ReleaseFile): Promise<void> {
  await db
    .insertInto('release_file')
    .values(file)
    .onConflict((conflict) => conflict.doNothing())
    .execute()
}

/** Grades that came after the newest run. */
export async function countNewGrades(db: Kysely<DB>, campaignId: number): Promise<number> {
  const row = await db
    .selectFrom('grade')
    .select((e) => e.fn.countAll<number>().as('count'))
    .where(inCampaign('grade.campaign_id', campaignId))
    .where('id', '>', (e) =>
      e
        .selectFrom('run')
        .select((r) => r.fn.coalesce(r.fn.max('newest_grade_id'), sql<number>`0`).as('id'))
        .where('run.campaign_id', '=', campaignId),
    )
    .executeTakeFirstOrThrow()
  return row.count
}

export async function countCalibrationStamps(db: Kysely<DB>, campaignId: number): Promise<number> {
  const row = await db
    .selectFrom('candidate')
    .select((e) => e.fn.countAll<number>().as('count'))
    .where('campaign_id', '=', campaignId)
    .where('truth', 'is not', null)
    .where('imaged_at', 'is not', null)
    .executeTakeFirstOrThrow()
  return row.count
}
