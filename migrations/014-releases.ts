import type { Kysely } from 'kysely'
import { growsOnly, hasColumn, inOneStep } from './in-one-step'

/**
 * Releases: frozen, numbered copies of a campaign. Rows of each of these tables are appended and never changed, and once a release
 * has its archive nothing is added to it any more but who may see it.
 */
const TABLES = [
  `create table release (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    number integer not null check (number >= 1),
    kind text not null check (kind in ('release', 'erratum', 'retraction')),
    corrects_id integer references release (id),
    -- What was wrong with the release that this one corrects or withdraws; stands on that one's page.
    statement text,
    title text not null,
    description text not null,
    -- A person or group a line, as they are to be cited.
    authors text not null,
    licence text not null,
    publisher text not null,
    year integer not null check (year between 1900 and 9999),
    how_to_cite text not null,
    software text not null,
    -- As they were: a campaign can be renamed.
    campaign_name text not null,
    survey text not null,
    acronym text not null,
    rule text not null check (json_valid(rule)),
    cosmology text not null check (json_valid(cosmology)),
    recipe_hash text,
    run_id integer not null references run (id),
    newest_grade_id integer not null,
    newest_candidate_id integer not null,
    newest_left_out_id integer not null,
    newest_sheet_mark_id integer not null,
    newest_ruling_id integer not null,
    newest_merge_id integer not null,
    newest_measurement_id integer not null,
    candidates integer not null check (candidates >= 0),
    entries integer not null check (entries >= 0),
    created_by integer not null references person (id),
    created_at text not null,
    unique (campaign_id, number),
    check ((kind = 'release') = (corrects_id is null)),
    check ((kind = 'release') = (statement is null)),
    check (kind <> 'retraction' or (candidates = 0 and entries = 0))
  ) strict`,
  'create index release_corrects on release (corrects_id) where corrects_id is not null',
  ...growsOnly('release'),

  // What a manifest or a ruling may change later, as it was: every judged candidate, no calibration stamp.
  `create table release_candidate (
    release_id integer not null references release (id),
    candidate_id integer not null references candidate (id),
    name text not null,
    ra_deg real,
    dec_deg real,
    lens_redshift real,
    source_redshift real,
    state text not null check (state in ('open', 'split', 'confirmed', 'set aside')),
    first_pass text not null,
    verdict_id integer references verdict (id),
    ruling_id integer references ruling (id),
    -- Of the confirmed ones, with what reference lists knew them as: a list of list, name and separation.
    designation text,
    known_as text check (known_as is null or json_valid(known_as)),
    primary key (release_id, candidate_id),
    check (state <> 'confirmed' or (ra_deg is not null and dec_deg is not null and designation is not null)),
    check ((state = 'confirmed') = (known_as is not null))
  ) strict, without rowid`,
  `create index release_candidate_entry on release_candidate (release_id, candidate_id) where state = 'confirmed'`,
  ...growsOnly('release_candidate'),

  `create table release_entry (
    id integer primary key,
    release_id integer not null references release (id),
    row_number integer not null check (row_number >= 1),
    candidate_id integer not null references candidate (id),
    -- The last part of the entry's permanent address.
    entry_key text not null,
    designation text not null,
    name text not null,
    ra_deg real not null check (ra_deg >= 0 and ra_deg < 360),
    dec_deg real not null check (dec_deg between -90 and 90),
    -- Tenths of a degree from the south pole: a cone is a few zones, in each a range of right ascension (Gray et al. 2004).
    zone integer not null generated always as (cast((dec_deg + 90) * 10 as integer)) virtual,
    class text check (class in ('A', 'B', 'C')),
    mean real,
    spread real,
    probability real,
    votes_a integer not null,
    votes_b integer not null,
    votes_c integer not null,
    votes_n integer not null,
    cannot_judge integer not null,
    decided_by text not null check (decided_by in ('verdict', 'ruling')),
    reason text not null,
    remarks text,
    tags text,
    -- As it was frozen.
    known_as text not null check (json_valid(known_as)),
    einstein_radius_arcsec real,
    einstein_radius_error_arcsec real,
    n_measured integer not null,
    -- What else was measured, as it was told then.
    measurement text check (measurement is null or json_valid(measurement)),
    lens_redshift real,
    source_redshift real,
    entered_at text,
    -- SHA-256 of the stamp that stands for the entry in a table, and of each view by its key.
    thumbnail text,
    stamps text not null check (json_valid(stamps)),
    unique (release_id, row_number),
    unique (release_id, entry_key),
    unique (release_id, candidate_id)
  ) strict`,
  'create index release_entry_zone on release_entry (release_id, zone, ra_deg, dec_deg)',
  'create index release_entry_class on release_entry (release_id, class)',
  'create index release_entry_thumbnail on release_entry (release_id, thumbnail) where thumbnail is not null',
  ...growsOnly('release_entry'),

  `create table release_file (
    release_id integer not null references release (id),
    name text not null,
    media_type text not null,
    bytes integer not null check (bytes >= 0),
    sha256 text not null check (length(sha256) = 64),
    primary key (release_id, name)
  ) strict, without rowid`,
  ...growsOnly('release_file'),

  // The newest row of a release holds; without one it is private. Of a link only the hash of its secret is kept.
  `create table release_access (
    id integer primary key,
    release_id integer not null references release (id),
    access text not null check (access in ('private', 'link', 'public')),
    token_hash text,
    changed_by integer not null references person (id),
    changed_at text not null,
    check ((access = 'link') = (token_hash is not null))
  ) strict`,
  'create index release_access_newest on release_access (release_id, id)',
  'create index release_access_token on release_access (token_hash) where token_hash is not null',
  ...growsOnly('release_access'),

  // A release whose files cannot be made. Its number stays used, and it stands in the way of no other.
  `create table release_given_up (
    release_id integer primary key references release (id),
    reason text not null check (length(trim(reason)) > 0),
    given_up_by integer not null references person (id),
    given_up_at text not null
  ) strict`,
  ...growsOnly('release_given_up'),
]

const made = `exists (select 1 from release_file where release_id = new.release_id and name = 'RELEASE.zip')`
const givenUp = (id: string): string => `exists (select 1 from release_given_up where release_id = ${id})`

const TRIGGERS = [
  `create trigger release_corrects_own before insert on release when new.corrects_id is not null and not exists (
      select 1 from release old where old.id = new.corrects_id and old.campaign_id = new.campaign_id
        and old.number < new.number and old.kind <> 'retraction' and not ${givenUp('old.id')})
    begin select raise(abort, 'a release corrects an earlier one of its campaign'); end`,
  `create trigger release_given_up_made before insert on release_given_up when ${made}
    begin select raise(abort, 'a release that has its archive is withdrawn, not given up'); end`,
  ...['release_candidate', 'release_entry', 'release_file'].map(
    (table) => `create trigger ${table}_given_up before insert on ${table} when ${givenUp('new.release_id')}
      begin select raise(abort, 'a release that was given up takes nothing more'); end`,
  ),
  ...['release_candidate', 'release_entry', 'release_file'].map(
    (table) => `create trigger ${table}_complete before insert on ${table} when ${made}
      begin select raise(abort, 'a release that has its archive is complete: publish a new one'); end`,
  ),
  `create trigger release_access_made before insert on release_access when new.access <> 'private' and not ${made}
    begin select raise(abort, 'a release is opened once its files are there'); end`,
  ...['release_candidate', 'release_entry'].map(
    (table) => `create trigger ${table}_no_stamp before insert on ${table}
      when (select truth from candidate where id = new.candidate_id) is not null
      begin select raise(abort, 'calibration candidates are in no release'); end`,
  ),
]

const NAMES = ['release_given_up', 'release_access', 'release_file', 'release_entry', 'release_candidate', 'release']

export async function up(db: Kysely<unknown>): Promise<void> {
  if (await hasColumn(db, 'release', 'number')) return
  await inOneStep(db, [...TABLES, ...TRIGGERS])
}

export async function down(db: Kysely<unknown>): Promise<void> {
  if (!(await hasColumn(db, 'release', 'number'))) return
  await inOneStep(
    db,
    NAMES.map((table) => `drop table ${table}`),
  )
}
