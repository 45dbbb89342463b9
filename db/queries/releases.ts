import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { Release, ReleaseAccess, ReleaseEntry, ReleaseFile } from '../schema/releases'
import type { IsoTime } from '../schema/values'

/** Written last: a release that has it is complete. */
export const ARCHIVE = 'RELEASE.zip'

export interface ReleaseRow extends Release {
  slug: string
  access: ReleaseAccess
  /** Of the link in force. */
  tokenHash: string | null
  /** Whether all its files are there. */
  made: 0 | 1
  /** Why it was left without them; null where it was not. */
  givenUpReason: string | null
}

function releases(db: Kysely<DB>) {
  const newest = (column: 'access' | 'token_hash') =>
    sql`(select ${sql.ref(column)} from release_access opened where opened.release_id = release.id order by opened.id desc limit 1)`
  return db
    .selectFrom('release')
    .innerJoin('campaign', 'campaign.id', 'release.campaign_id')
    .leftJoin('release_given_up', 'release_given_up.release_id', 'release.id')
    .selectAll('release')
    .select(['campaign.slug', 'release_given_up.reason as givenUpReason'])
    .select(sql<ReleaseAccess>`coalesce(${newest('access')}, 'private')`.as('access'))
    .select(sql<string | null>`${newest('token_hash')}`.as('tokenHash'))
    .select(
      sql<0 | 1>`exists (select 1 from release_file where release_id = release.id and name = ${ARCHIVE})`.as('made'),
    )
}

/** Newest first. */
export async function listReleases(db: Kysely<DB>, campaignId: number): Promise<ReleaseRow[]> {
  return releases(db).where('release.campaign_id', '=', campaignId).orderBy('release.number', 'desc').execute()
}

export async function findRelease(db: Kysely<DB>, campaignId: number, number: number): Promise<ReleaseRow | null> {
  const row = await releases(db)
    .where('release.campaign_id', '=', campaignId)
    .where('release.number', '=', number)
    .executeTakeFirst()
  return row ?? null
}

/** By the campaign's slug, for readers without a membership: who may see it is for the caller to decide by `access`. */
export async function findReleaseBySlug(db: Kysely<DB>, slug: string, number: number): Promise<ReleaseRow | null> {
  const row = await releases(db)
    .where('campaign.slug', '=', slug)
    .where('release.number', '=', number)
    .executeTakeFirst()
  return row ?? null
}

export async function findReleaseById(db: Kysely<DB>, id: number): Promise<ReleaseRow | null> {
  return (await releases(db).where('release.id', '=', id).executeTakeFirst()) ?? null
}

/** Complete releases that anybody may see, newest first; of one campaign, or of all. */
export async function listPublicReleases(db: Kysely<DB>, slug?: string): Promise<ReleaseRow[]> {
  const rows = await releases(db)
    .$if(slug !== undefined, (query) => query.where('campaign.slug', '=', slug!))
    .orderBy('release.created_at', 'desc')
    .orderBy('release.id', 'desc')
    .execute()
  return rows.filter((row) => row.access === 'public' && row.made === 1)
}

/** What corrects or withdraws this release, oldest first, whoever may see it; what was given up does neither. */
export async function listNoticesOf(db: Kysely<DB>, releaseId: number): Promise<ReleaseRow[]> {
  return releases(db)
    .where('release.corrects_id', '=', releaseId)
    .where('release_given_up.release_id', 'is', null)
    .orderBy('release.number')
    .execute()
}

/** In the order of the catalogue, after a row number. */
export async function listReleaseEntries(
  db: Kysely<DB>,
  releaseId: number,
  page: { after: number; limit: number },
): Promise<ReleaseEntry[]> {
  return db
    .selectFrom('release_entry')
    .selectAll()
    .where('release_id', '=', releaseId)
    .where('row_number', '>', page.after)
    .orderBy('row_number')
    .limit(page.limit)
    .execute()
}

export async function findReleaseEntry(db: Kysely<DB>, releaseId: number, key: string): Promise<ReleaseEntry | null> {
  const row = await db
    .selectFrom('release_entry')
    .selectAll()
    .where('release_id', '=', releaseId)
    .where('entry_key', '=', key)
    .executeTakeFirst()
  return row ?? null
}

/** By name; `RELEASE.zip` is there once all are. */
export async function listReleaseFiles(db: Kysely<DB>, releaseId: number): Promise<ReleaseFile[]> {
  return db.selectFrom('release_file').selectAll().where('release_id', '=', releaseId).orderBy('name').execute()
}

export async function findReleaseFile(db: Kysely<DB>, releaseId: number, name: string): Promise<ReleaseFile | null> {
  const row = await db
    .selectFrom('release_file')
    .selectAll()
    .where('release_id', '=', releaseId)
    .where('name', '=', name)
    .executeTakeFirst()
  return row ?? null
}

/** The newest holds. */
export async function insertReleaseAccess(
  db: Kysely<DB>,
  change: { releaseId: number; access: ReleaseAccess; tokenHash: string | null; changedBy: number; now: IsoTime },
): Promise<void> {
  await db
    .insertInto('release_access')
    .values({
      release_id: change.releaseId,
      access: change.access,
      token_hash: change.tokenHash,
      changed_by: change.changedBy,
      changed_at: change.now,
    })
    .execute()
}

export async function insertGivenUp(
  db: Kysely<DB>,
  { releaseId, reason, by, now }: { releaseId: number; reason: string; by: number; now: IsoTime },
): Promise<void> {
  await db
    .insertInto('release_given_up')
    .values({ release_id: releaseId, reason, given_up_by: by, given_up_at: now })
    .execute()
}
