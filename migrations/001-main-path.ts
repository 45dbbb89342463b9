import { sql, type Kysely } from 'kysely'

/**
 * The tables of the main path: people, campaigns, intake, stamps, grading, consensus, rulings, catalogue, and the platform's
 * jobs, mail and audit. Times are UTC ISO text, angles degrees, sizes arcseconds, booleans 0/1.
 */
const STATEMENTS = [
  `create table site (key text primary key, value text not null) strict`,

  `create table person (
    id integer primary key,
    email text collate nocase unique,
    name text not null,
    password_hash text,
    is_admin integer not null default 0 check (is_admin in (0, 1)),
    session_epoch integer not null default 1,
    created_at text not null,
    left_at text
  ) strict`,

  `create table campaign (
    id integer primary key,
    slug text not null unique,
    name text not null,
    survey text not null,
    acronym text not null,
    bands text not null check (json_valid(bands)),
    name_pattern text,
    hubble_constant real not null default 70,
    omega_matter real not null default 0.3,
    created_by integer not null references person (id),
    created_at text not null
  ) strict`,

  `create table membership (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    person_id integer not null references person (id),
    role text not null check (role in ('lead', 'grader', 'viewer')),
    pseudonym text not null,
    created_at text not null,
    ended_at text,
    unique (campaign_id, person_id),
    unique (campaign_id, pseudonym)
  ) strict`,
  `create index membership_person on membership (person_id)`,

  `create table invitation (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    email text not null collate nocase,
    role text not null check (role in ('lead', 'grader', 'viewer')),
    token_hash text not null unique,
    invited_by integer not null references person (id),
    created_at text not null,
    expires_at text not null,
    accepted_at text,
    accepted_by integer references person (id),
    withdrawn_at text
  ) strict`,
  `create index invitation_campaign on invitation (campaign_id)`,

  `create table rule (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    version integer not null,
    method text not null check (method in ('mean')),
    grades_wanted integer not null check (grades_wanted >= 1),
    least_grades integer not null check (least_grades >= 1 and least_grades <= grades_wanted),
    parameters text not null check (json_valid(parameters)),
    created_by integer not null references person (id),
    created_at text not null,
    unique (campaign_id, version)
  ) strict`,

  `create table recipe (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    version integer not null,
    parameters text not null check (json_valid(parameters)),
    hash text not null,
    created_by integer not null references person (id),
    created_at text not null,
    unique (campaign_id, version)
  ) strict`,

  `create table batch (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    name text not null,
    created_by integer not null references person (id),
    created_at text not null
  ) strict`,
  `create index batch_campaign on batch (campaign_id)`,

  `create table file (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    batch_id integer not null references batch (id),
    name text not null,
    kind text not null check (kind in ('fits', 'manifest')),
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
    unique (campaign_id, sha256, name)
  ) strict`,
  `create index file_batch on file (batch_id)`,
  `create index file_fate on file (campaign_id, fate)`,
  `create index file_name on file (campaign_id, name)`,
  `create index file_replaced on file (replaced_by) where replaced_by is not null`,
  `create index file_duplicate on file (duplicate_of) where duplicate_of is not null`,

  `create table manifest_row (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    file_id integer not null references file (id),
    line integer not null,
    file_name text,
    file_base text collate nocase,
    candidate text,
    band text,
    ra_deg real,
    dec_deg real,
    pixel_scale_arcsec real,
    score real,
    lens_redshift real,
    source_redshift real
  ) strict`,
  `create index manifest_row_base on manifest_row (campaign_id, file_base)`,
  `create index manifest_row_file on manifest_row (file_id)`,
  `create index manifest_row_candidate on manifest_row (campaign_id, candidate)`,

  `create table candidate (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    name text not null,
    ra_deg real,
    dec_deg real,
    pixel_scale_arcsec real,
    score real,
    lens_redshift real,
    source_redshift real,
    truth text check (truth in ('lens', 'not a lens')),
    imaged_at text,
    grades_given integer not null default 0,
    state text not null default 'open' check (state in ('open', 'split', 'confirmed', 'set aside')),
    state_cause text check (state_cause in ('verdict', 'ruling')),
    state_cause_id integer,
    state_since text not null,
    verdict_id integer,
    ruling_id integer,
    created_at text not null,
    unique (campaign_id, name),
    check (ra_deg is null or (ra_deg >= 0 and ra_deg < 360)),
    check (dec_deg is null or (dec_deg >= -90 and dec_deg <= 90)),
    -- A calibration candidate is never decided: it has a truth already.
    check (truth is null or state = 'open')
  ) strict`,
  `create index candidate_dec on candidate (campaign_id, dec_deg)`,
  `create index candidate_state on candidate (campaign_id, state, id)`,
  `create index candidate_list on candidate (campaign_id, id, truth, verdict_id)`,
  `create index candidate_ra on candidate (campaign_id, ra_deg)`,
  `create index candidate_score on candidate (campaign_id, score)`,
  `create index candidate_queue on candidate (campaign_id, grades_given desc, id) where imaged_at is not null`,

  `create table state_change (
    id integer primary key,
    candidate_id integer not null references candidate (id),
    from_state text not null,
    to_state text not null,
    cause text not null check (cause in ('verdict', 'ruling')),
    cause_id integer not null,
    at text not null
  ) strict`,
  `create index state_change_candidate on state_change (candidate_id, id)`,

  `create table plane (
    id integer primary key,
    candidate_id integer not null references candidate (id),
    band text not null,
    file_id integer not null references file (id),
    hdu integer not null,
    plane_index integer not null,
    width integer not null,
    height integer not null,
    wcs text check (wcs is null or json_valid(wcs)),
    pixel_scale_arcsec real,
    background real,
    noise real,
    unique (candidate_id, band)
  ) strict`,
  `create index plane_file on plane (file_id)`,

  `create table stamp (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    candidate_id integer not null references candidate (id),
    recipe_id integer not null references recipe (id),
    view text not null,
    sha256 text not null,
    bytes integer not null,
    width integer not null,
    height integer not null,
    note text,
    unique (candidate_id, recipe_id, view)
  ) strict`,
  `create index stamp_sha256 on stamp (campaign_id, sha256)`,

  `create table lease (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    candidate_id integer not null references candidate (id),
    person_id integer not null references person (id),
    until text not null,
    unique (candidate_id, person_id)
  ) strict`,
  `create index lease_person on lease (campaign_id, person_id, until)`,

  `create table grade (
    id integer primary key,
    uid text not null unique,
    campaign_id integer not null references campaign (id),
    candidate_id integer not null references candidate (id),
    person_id integer not null references person (id),
    occasion text not null check (occasion in ('first', 'repeat', 'asked')),
    grade text not null check (grade in ('A', 'B', 'C', 'N', 'U')),
    tags text not null default '[]' check (json_valid(tags)),
    reason text,
    remark text,
    recipe_id integer references recipe (id),
    view text,
    seconds real,
    replaces integer unique references grade (id),
    given_at text not null
  ) strict`,
  `create index grade_candidate on grade (candidate_id, occasion, person_id)`,
  `create index grade_person on grade (campaign_id, person_id, id)`,
  // Several rows without 'replaces' would be several first grades; a correction names the row it corrects.
  `create unique index grade_one_first on grade (candidate_id, person_id) where occasion = 'first' and replaces is null`,
  `create trigger grade_replaces_own before insert on grade when new.replaces is not null and not exists (
    select 1 from grade old where old.id = new.replaces and old.candidate_id = new.candidate_id
      and old.person_id = new.person_id and old.occasion = new.occasion)
    begin select raise(abort, 'a correction replaces a grade of the same person, candidate and occasion'); end`,

  `create table run (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    rule_id integer not null references rule (id),
    input_digest text not null,
    newest_grade_id integer not null,
    newest_candidate_id integer not null,
    summary text not null check (json_valid(summary)),
    started_by integer references person (id),
    created_at text not null
  ) strict`,
  `create index run_campaign on run (campaign_id, id)`,

  `create table verdict (
    id integer primary key,
    run_id integer not null references run (id),
    candidate_id integer not null references candidate (id),
    outcome text not null check (outcome in ('open', 'split', 'confirmed', 'set aside')),
    grades integer not null,
    cannot_judge integer not null,
    mean real,
    spread real,
    probability real,
    reason text not null
  ) strict`,
  // With mean and spread, so that candidates are sorted by them without reading their reasons.
  `create index verdict_candidate on verdict (candidate_id, id, mean, spread)`,
  `create index verdict_run on verdict (run_id)`,

  `create table ruling (
    id integer primary key,
    candidate_id integer not null references candidate (id),
    person_id integer not null references person (id),
    outcome text not null check (outcome in ('confirmed', 'set aside', 'open', 'by verdict')),
    grade text check (grade in ('A', 'B', 'C')),
    reason text not null check (length(trim(reason)) > 0),
    created_at text not null
  ) strict`,
  `create index ruling_candidate on ruling (candidate_id, id)`,

  `create table designation (
    candidate_id integer primary key references candidate (id),
    campaign_id integer not null references campaign (id),
    designation text not null,
    given_at text not null,
    unique (campaign_id, designation)
  ) strict`,

  `create table entry (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    candidate_id integer not null references candidate (id),
    event text not null check (event in ('entered', 'left')),
    cause text not null check (cause in ('verdict', 'ruling')),
    cause_id integer not null,
    at text not null
  ) strict`,
  `create index entry_candidate on entry (candidate_id, id)`,
  ...['entry', 'designation', 'ruling', 'verdict'].map(
    (table) => `create trigger ${table}_not_calibration before insert on ${table}
      when exists (select 1 from candidate where id = new.candidate_id and truth is not null)
      begin select raise(abort, 'a calibration candidate is never decided and never in the catalogue'); end`,
  ),

  `create table job (
    id integer primary key,
    kind text not null,
    campaign_id integer references campaign (id),
    unique_key text,
    payload text not null check (json_valid(payload)),
    state text not null default 'queued' check (state in ('queued', 'running', 'done', 'failed')),
    run_after text not null,
    lease_until text,
    attempts integer not null default 0,
    done integer not null default 0,
    total integer not null default 0,
    error text,
    created_at text not null,
    updated_at text not null
  ) strict`,
  `create index job_ready on job (state, run_after, id)`,
  `create index job_campaign on job (campaign_id, state)`,
  `create unique index job_once on job (unique_key) where state = 'queued'`,

  `create table mail (
    id integer primary key,
    recipient text not null,
    subject text not null,
    body text not null,
    state text not null default 'waiting' check (state in ('waiting', 'sent', 'kept')),
    error text,
    created_at text not null,
    sent_at text
  ) strict`,

  `create table audit_event (
    id integer primary key,
    at text not null,
    person_id integer references person (id),
    campaign_id integer references campaign (id),
    action text not null,
    subject text,
    detail text not null default '{}' check (json_valid(detail))
  ) strict`,
  `create index audit_event_campaign on audit_event (campaign_id, id)`,
]

const GROWS_ONLY = [
  'rule',
  'recipe',
  'grade',
  'run',
  'verdict',
  'ruling',
  'state_change',
  'designation',
  'entry',
  'audit_event',
]

const TABLES = [
  'audit_event mail job entry designation ruling verdict run grade lease stamp plane state_change candidate manifest_row file',
  'batch recipe rule invitation membership campaign person site',
]
  .join(' ')
  .split(' ')

export async function up(db: Kysely<unknown>): Promise<void> {
  for (const statement of STATEMENTS) await sql.raw(statement).execute(db)
  for (const table of GROWS_ONLY) {
    for (const verb of ['update', 'delete'] as const) {
      await sql
        .raw(
          `create trigger ${table}_no_${verb} before ${verb} on ${table}
           begin select raise(abort, '${table} rows are never changed: append a new one'); end`,
        )
        .execute(db)
    }
  }
}

export async function down(db: Kysely<unknown>): Promise<void> {
  for (const table of TABLES) await sql.raw(`drop table ${table}`).execute(db)
}
