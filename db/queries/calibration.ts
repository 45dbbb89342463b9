import { randomInt } from 'node:crypto'
import { sql, type Kysely, type RawBuilder, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import { toJson } from '../schema/values'
import { among, inCampaign } from './by-ids'
import type { NewPlane } from './cutouts'
import { upsertPlanes } from './cutouts'

export type GalaxyFilter = 'set aside' | 'graded N' | 'any'

export interface GalaxyRow {
  id: number
  name: string
  state: string
  grades: number
}

/** First grades that stand. */
const standing = sql`grade.occasion = 'first' and not exists (select 1 from grade later where later.replaces = grade.id)`
const GRADED_N = sql<SqlBool>`candidate.grades_given > 0
  and exists (select 1 from grade where grade.candidate_id = candidate.id and grade.grade = 'N' and ${standing})
  and not exists (select 1 from grade where grade.candidate_id = candidate.id and grade.grade in ('A', 'B', 'C') and ${standing})`

/**
 * Imaged candidates of the campaign that may become calibration stamps, by name: none that is confirmed, none that is one already or
 * has been used for one.
 */
export async function listGalaxies(
  db: Kysely<DB>,
  campaignId: number,
  filter: { which: GalaxyFilter; name: string | null; limit: number },
): Promise<GalaxyRow[]> {
  return db
    .selectFrom('candidate')
    .select(['candidate.id', 'candidate.name', 'candidate.state', 'candidate.grades_given as grades'])
    .where('candidate.campaign_id', '=', campaignId)
    .where('candidate.truth', 'is', null)
    .where('candidate.imaged_at', 'is not', null)
    .where('candidate.state', '!=', 'confirmed')
    .where((e) =>
      e.not(
        e.exists(
          e.selectFrom('candidate as made').select('made.id').whereRef('made.painted_over', '=', 'candidate.id'),
        ),
      ),
    )
    .$if(filter.which === 'set aside', (query) => query.where('candidate.state', '=', 'set aside'))
    .$if(filter.which === 'graded N', (query) => query.where(GRADED_N))
    .$if(filter.name !== null, (query) =>
      query.where(sql<SqlBool>`instr(lower(candidate.name), ${(filter.name ?? '').toLowerCase()}) > 0`),
    )
    .orderBy('candidate.name')
    .limit(filter.limit)
    .execute()
}

export interface GalaxyFacts {
  id: number
  name: string
  raDeg: number | null
  decDeg: number | null
  pixelScaleArcsec: number | null
  lensRedshift: number | null
  sourceRedshift: number | null
}

/** Of these ids, the candidates that may become calibration stamps. */
export async function listGalaxiesById(
  db: Kysely<DB>,
  campaignId: number,
  ids: readonly number[],
): Promise<GalaxyFacts[]> {
  if (ids.length === 0) return []
  return db
    .selectFrom('candidate')
    .select([
      'id',
      'name',
      'ra_deg as raDeg',
      'dec_deg as decDeg',
      'pixel_scale_arcsec as pixelScaleArcsec',
      'lens_redshift as lensRedshift',
      'source_redshift as sourceRedshift',
    ])
    .where(inCampaign('campaign_id', campaignId))
    .where('id', 'in', among(ids))
    .where('truth', 'is', null)
    .where('imaged_at', 'is not', null)
    .where('state', '!=', 'confirmed')
    .execute()
}

/** Names to make new ones like: the first and the last thousand. */
export async function listNamesOfEnds(db: Kysely<DB>, campaignId: number): Promise<string[]> {
  const part = (direction: 'asc' | 'desc') =>
    db
      .selectFrom('candidate')
      .select('name')
      .where('campaign_id', '=', campaignId)
      .orderBy('name', direction)
      .limit(1000)
      .execute()
  const rows = [...(await part('asc')), ...(await part('desc'))]
  return [...new Set(rows.map(({ name }) => name))]
}

/** The score of an ordinary candidate, by lot: `share` from 0 to 1 of the way through them. */
export async function scoreByLot(db: Kysely<DB>, campaignId: number, share: number): Promise<number | null> {
  const ordinary = db
    .selectFrom('candidate')
    .select(['id', 'score'])
    .where('campaign_id', '=', campaignId)
    .where('truth', 'is', null)
    .limit(1)
  const first = await ordinary.orderBy('id').executeTakeFirst()
  const last = await ordinary.orderBy('id', 'desc').executeTakeFirst()
  if (!first || !last) return null
  const from = Math.floor(first.id + share * (last.id - first.id))
  return (await ordinary.where('id', '>=', from).orderBy('id').executeTakeFirst())?.score ?? null
}

/** Positions of some candidates, from one on that is drawn. */
export async function listPositionsByLot(
  db: Kysely<DB>,
  campaignId: number,
  share: number,
): Promise<{ raDeg: number; decDeg: number }[]> {
  const from = (where: RawBuilder<SqlBool>) =>
    sql<{ raDeg: number; decDeg: number }>`
    select ra_deg as raDeg, dec_deg as decDeg from candidate indexed by candidate_queue_shuffled
    where campaign_id + 0 = ${campaignId} and imaged_at is not null and ${where} and truth is null
      and ra_deg is not null and dec_deg is not null
    order by spread limit ${POSITIONS}`.execute(db)
  const place = Math.floor(share * 2 ** 32)
  const { rows } = await from(sql<SqlBool>`spread >= ${place}`)
  return rows.length === POSITIONS ? rows : [...rows, ...(await from(sql<SqlBool>`spread < ${place}`)).rows]
}

const POSITIONS = 400
/** Numbers drawn at once among those of the candidates, and how often. */
const DRAWN = 64
const DRAWS = 8

/** A number among those of the campaign's candidates that intake has left free; undefined where none is found. */
async function freeIdAmong(db: Kysely<DB>, campaignId: number): Promise<number | undefined> {
  const ends = await db
    .selectFrom('candidate')
    .select((e) => [e.fn.min('id').as('least'), e.fn.max('id').as('most')])
    .where('campaign_id', '=', campaignId)
    .where('truth', 'is', null)
    .executeTakeFirst()
  if (ends?.least == null) return undefined
  for (let draw = 0; draw < DRAWS; draw++) {
    const ids = Array.from({ length: DRAWN }, () => randomInt(ends.least, ends.most + 1))
    const { rows } = await sql<{ id: number }>`
      select value as id from json_each(${JSON.stringify(ids)}) where value not in (select id from candidate)
      limit 1`.execute(db)
    if (rows[0]) return rows[0].id
  }
  return undefined
}

export interface NewCalibrationStamp extends Omit<GalaxyFacts, 'id'> {
  campaignId: number
  truth: 'lens' | 'not a lens'
  score: number | null
  paintedOver: number
  painting: unknown
  explanation: string
  now: string
}

/** The new candidate's id. It is not imaged yet. */
export async function insertCalibrationStamp(
  db: Kysely<DB>,
  stamp: NewCalibrationStamp,
  planes: readonly Omit<NewPlane, 'candidateId'>[],
): Promise<number> {
  const { id } = await db
    .insertInto('candidate')
    .values({
      // Among the candidates' own, else it would be told by a number above them all.
      id: await freeIdAmong(db, stamp.campaignId),
      campaign_id: stamp.campaignId,
      name: stamp.name,
      ra_deg: stamp.raDeg,
      dec_deg: stamp.decDeg,
      pixel_scale_arcsec: stamp.pixelScaleArcsec,
      score: stamp.score,
      lens_redshift: stamp.lensRedshift,
      source_redshift: stamp.sourceRedshift,
      truth: stamp.truth,
      painted_over: stamp.paintedOver,
      painting: toJson<unknown>(stamp.painting),
      explanation: stamp.explanation,
      imaged_at: null,
      state_cause: null,
      state_cause_id: null,
      state_since: stamp.now,
      verdict_id: null,
      ruling_id: null,
      created_at: stamp.now,
    })
    .returning('id')
    .executeTakeFirstOrThrow()
  await upsertPlanes(
    db,
    planes.map((plane) => ({ ...plane, candidateId: id })),
  )
  return id
}

/** Which parts of an order have been made, by their number in it, with the candidates that came of them. */
export async function listMadeOfOrder(
  db: Kysely<DB>,
  campaignId: number,
  order: string,
): Promise<{ id: number; part: number; isImaged: 0 | 1 }[]> {
  return db
    .selectFrom('candidate')
    .select([
      'id',
      sql<number>`json_extract(painting, '$.part')`.as('part'),
      sql<0 | 1>`imaged_at is not null`.as('isImaged'),
    ])
    .where('campaign_id', '=', campaignId)
    .where('truth', 'is not', null)
    .where(sql<SqlBool>`json_extract(painting, '$.order') = ${order}`)
    .execute()
}

export interface StampRow {
  id: number
  name: string
  truth: 'lens' | 'not a lens'
  explanation: string | null
  paintedOver: string | null
  isPainted: 0 | 1
  isImaged: 0 | 1
  /** First grades that stand, without 'cannot judge', and how many of them are A, B or C. */
  grades: number
  takenForLens: number
  createdAt: string
}

/** Calibration stamps of the campaign, the newest first, with what people made of them at the bench. */
export async function listCalibrationStamps(db: Kysely<DB>, campaignId: number, limit: number): Promise<StampRow[]> {
  const count = (letters: string) =>
    sql<number>`(select count(*) from grade where grade.candidate_id = candidate.id
      and grade.grade in (${sql.raw(letters)}) and ${standing})`
  return db
    .selectFrom('candidate')
    .leftJoin('candidate as galaxy', 'galaxy.id', 'candidate.painted_over')
    .select([
      'candidate.id',
      'candidate.name',
      'candidate.truth',
      'candidate.explanation',
      'galaxy.name as paintedOver',
      sql<0 | 1>`json_extract(candidate.painting, '$.painted') is not null`.as('isPainted'),
      sql<0 | 1>`candidate.imaged_at is not null`.as('isImaged'),
      count("'A', 'B', 'C', 'N'").as('grades'),
      count("'A', 'B', 'C'").as('takenForLens'),
      'candidate.created_at as createdAt',
    ])
    .where('candidate.campaign_id', '=', campaignId)
    .where('candidate.truth', 'is not', null)
    .orderBy('candidate.id', 'desc')
    .limit(limit)
    .$narrowType<{ truth: 'lens' | 'not a lens' }>()
    .execute()
}

export async function countCalibrationStamps(
  db: Kysely<DB>,
  campaignId: number,
): Promise<{ lenses: number; others: number; waiting: number }> {
  const row = await db
    .selectFrom('candidate')
    .select([
      sql<number>`coalesce(sum(truth = 'lens' and imaged_at is not null), 0)`.as('lenses'),
      sql<number>`coalesce(sum(truth <> 'lens' and imaged_at is not null), 0)`.as('others'),
      sql<number>`coalesce(sum(imaged_at is null), 0)`.as('waiting'),
    ])
    .where('campaign_id', '=', campaignId)
    .where('truth', 'is not', null)
    .executeTakeFirstOrThrow()
  return row
}

/** What the newest events of this action say, the newest first. */
export async function listEventDetails(
  db: Kysely<DB>,
  campaignId: number,
  action: string,
  limit: number,
): Promise<{ at: string; detail: string }[]> {
  return db
    .selectFrom('audit_event')
    .select(['at', 'detail'])
    .where('campaign_id', '=', campaignId)
    .where('action', '=', action)
    .orderBy('id', 'desc')
    .limit(limit)
    .execute() as Promise<{ at: string; detail: string }[]>
}
