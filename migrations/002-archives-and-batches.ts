import { sql, type Kysely } from 'kysely'

/**
 * Files may be archives, and files may have come out of one; a manifest may come with a choice of its columns; a batch can be
 * paused; what is wrong with parts of a file has rows of its own. SQLite cannot change a check, so `file` is made anew.
 */
const fileTable = (name: string, kinds: string, more: string): string => `create table ${name} (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    batch_id integer not null references batch (id),
    name text not null,
    kind text not null check (kind in (${kinds})),
    sha256 text not null,
    bytes integer not null,
    fate text not null check (fate in ('stored', 'read', 'imaged', 'duplicate', 'refused')),
    fault text,
    reason text,
    duplicate_of integer references file (id),
    replaced_by integer references file (id),
    created_by integer not null references person (id),
    created_at text not null,
    updated_at text not null,
    ${more}
    unique (campaign_id, sha256, name)
  ) strict`

const COLUMNS =
  'id, campaign_id, batch_id, name, kind, sha256, bytes, fate, fault, reason, duplicate_of, replaced_by, created_by, created_at, updated_at'

const INDEXES = [
  'create index file_batch on file (batch_id)',
  'create index file_fate on file (campaign_id, fate)',
  'create index file_name on file (campaign_id, name)',
  'create index file_replaced on file (replaced_by) where replaced_by is not null',
  'create index file_duplicate on file (duplicate_of) where duplicate_of is not null',
]

/** The order that SQLite's manual gives for a new table in place of an old one (lang_altertable.html, section 7). */
const replaceFile = (definition: string, which: string): string[] => [
  definition,
  `insert into file_made (${COLUMNS}) select ${COLUMNS} from file where ${which}`,
  'drop table file',
  'alter table file_made rename to file',
  ...INDEXES,
]

/** Foreign keys are off while their table is away, and every reference is looked at before the change is kept. */
async function inOneStep(db: Kysely<unknown>, statements: readonly string[]): Promise<void> {
  await sql.raw('pragma foreign_keys = off').execute(db)
  try {
    await sql.raw('begin immediate').execute(db)
    try {
      for (const statement of statements) await sql.raw(statement).execute(db)
      const broken = await sql.raw('pragma foreign_key_check').execute(db)
      if (broken.rows.length > 0) throw new Error(`References would break: ${JSON.stringify(broken.rows.slice(0, 3))}`)
      await sql.raw('commit').execute(db)
    } catch (error) {
      await sql.raw('rollback').execute(db)
      throw error
    }
  } finally {
    await sql.raw('pragma foreign_keys = on').execute(db)
  }
}

async function isApplied(db: Kysely<unknown>): Promise<boolean> {
  const found = await sql.raw("select 1 from pragma_table_info('file') where name = 'archive_id'").execute(db)
  return found.rows.length > 0
}

export async function up(db: Kysely<unknown>): Promise<void> {
  // The note that it was applied is written apart from it: a kill between the two must not end in an error.
  if (await isApplied(db)) return
  const more = `archive_id integer references file (id),
    columns text check (columns is null or json_valid(columns)),`
  await inOneStep(db, [
    ...replaceFile(fileTable('file_made', "'fits', 'manifest', 'archive'", more), 'true'),
    'create index file_archive on file (archive_id, name) where archive_id is not null',
    "alter table batch add column state text not null default 'open' check (state in ('open', 'paused'))",
    `create table file_problem (
      id integer primary key,
      file_id integer not null references file (id),
      line integer,
      sentence text not null
    ) strict`,
    'create index file_problem_file on file_problem (file_id, id)',
  ])
}

export async function down(db: Kysely<unknown>): Promise<void> {
  if (!(await isApplied(db))) return
  await inOneStep(db, [
    'drop table file_problem',
    'alter table batch drop column state',
    ...replaceFile(fileTable('file_made', "'fits', 'manifest'", ''), "kind != 'archive'"),
  ])
}
