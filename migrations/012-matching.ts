import type { Kysely } from 'kysely'
import { growsOnly, hasColumn, inOneStep } from './in-one-step'

/**
 * Matching: lists of known objects, what is close to what on the sky, what leads decided of it, and candidates that were merged.
 * Matches follow from positions, lists and radii and are made anew; decisions and merges are appended.
 */
const TABLES = [
  // How near two candidates must be to be proposed as one object.
  `alter table campaign add column match_radius_arcsec real not null default 2
    check (match_radius_arcsec > 0 and match_radius_arcsec <= 600)`,

  `create table reference_list (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    name text not null check (length(trim(name)) > 0),
    -- Where it comes from, and of when it is: both as the lead tells them.
    source text not null,
    list_date text not null,
    file_name text not null,
    format text not null check (format in ('csv', 'votable')),
    sha256 text not null check (length(sha256) = 64),
    bytes integer not null check (bytes >= 0),
    -- Which columns hold what, their units and frame; null until a lead has chosen.
    mapping text check (mapping is null or json_valid(mapping)),
    rows integer not null default 0 check (rows >= 0),
    -- Those of its rows that have a position.
    positions integer not null default 0 check (positions >= 0 and positions <= rows),
    radius_arcsec real not null check (radius_arcsec > 0 and radius_arcsec <= 600),
    keeps_out_of_new integer not null default 1 check (keeps_out_of_new in (0, 1)),
    state text not null check (state in ('draft', 'reading', 'ready', 'refused', 'retired')),
    reason text,
    uploaded_by integer not null references person (id),
    uploaded_at text not null,
    state_since text not null,
    unique (campaign_id, sha256),
    check (state not in ('reading', 'ready') or mapping is not null),
    check (state <> 'refused' or reason is not null)
  ) strict`,

  `create table reference_object (
    list_id integer not null references reference_list (id),
    -- The line of a CSV, the row of a VOTable.
    row_number integer not null check (row_number >= 1),
    name text not null,
    -- ICRS degrees; both null where the row has none.
    ra_deg real check (ra_deg is null or (ra_deg >= 0 and ra_deg < 360)),
    dec_deg real check (dec_deg is null or (dec_deg >= -90 and dec_deg <= 90)),
    redshift real,
    -- Values of the other columns that were kept, as text by column.
    more text check (more is null or json_valid(more)),
    primary key (list_id, row_number),
    check ((ra_deg is null) = (dec_deg is null))
  ) strict, without rowid`,
  'create index reference_object_cone on reference_object (list_id, dec_deg, ra_deg)',

  `create table object_match (
    candidate_id integer not null references candidate (id),
    list_id integer not null references reference_list (id),
    row_number integer not null,
    separation_arcsec real not null check (separation_arcsec >= 0),
    primary key (candidate_id, list_id, row_number)
  ) strict, without rowid`,
  'create index object_match_list on object_match (list_id, candidate_id)',

  // Each pair once, the smaller id first.
  `create table candidate_match (
    first_id integer not null references candidate (id),
    second_id integer not null references candidate (id),
    first_campaign_id integer not null references campaign (id),
    second_campaign_id integer not null references campaign (id),
    separation_arcsec real not null check (separation_arcsec >= 0),
    primary key (first_id, second_id),
    check (first_id < second_id)
  ) strict, without rowid`,
  'create index candidate_match_second on candidate_match (second_id, first_id)',
  `create index candidate_match_duplicates on candidate_match (first_campaign_id, separation_arcsec)
    where first_campaign_id = second_campaign_id`,

  // Candidates whose place has changed since they were matched.
  `create table match_due (
    campaign_id integer not null references campaign (id),
    candidate_id integer not null references candidate (id),
    primary key (campaign_id, candidate_id)
  ) strict, without rowid`,

  // Of a candidate and another (the smaller id first), or of a candidate and a row of a list; the newest holds.
  `create table match_decision (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    candidate_id integer not null references candidate (id),
    other_id integer references candidate (id),
    list_id integer references reference_list (id),
    row_number integer,
    decision text not null check (decision in ('same', 'different', 'undecided')),
    reason text not null check (length(trim(reason)) > 0),
    person_id integer not null references person (id),
    created_at text not null,
    check ((other_id is null) = (list_id is not null)),
    check ((list_id is null) = (row_number is null)),
    check (other_id is null or candidate_id < other_id)
  ) strict`,
  'create index match_decision_other on match_decision (candidate_id, other_id, id) where other_id is not null',
  'create index match_decision_object on match_decision (candidate_id, list_id, row_number, id) where list_id is not null',
  'create index match_decision_campaign on match_decision (campaign_id, id)',
  ...growsOnly('match_decision'),

  `create table merge (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    kept_id integer not null references candidate (id),
    merged_id integer not null references candidate (id),
    event text not null check (event in ('merged', 'parted')),
    reason text not null check (length(trim(reason)) > 0),
    person_id integer not null references person (id),
    -- What was ruled on the merged candidate with it, and what stood on it before; null: its verdict.
    ruling_id integer not null unique references ruling (id),
    ruling_before_id integer references ruling (id),
    created_at text not null,
    check (kept_id <> merged_id)
  ) strict`,
  'create index merge_merged on merge (merged_id, id)',
  'create index merge_kept on merge (kept_id, id)',
  'create index merge_campaign on merge (campaign_id, id)',
  ...growsOnly('merge'),
]

/** Whether the newest event of this candidate as the merged one is 'merged'. */
const isMerged = (id: string): string =>
  `ifnull((select event from merge where merged_id = ${id} order by id desc limit 1), '') = 'merged'`
const isCalibration = (id: string): string => `(select truth from candidate where id = ${id}) is not null`
// Without a conflict clause: within a trigger the one of the statement that fires it would hold (lang_createtrigger.html of SQLite).
const due = `insert into match_due select new.campaign_id, new.id
      where not exists (select 1 from match_due where campaign_id = new.campaign_id and candidate_id = new.id)`
const hasPosition = 'new.truth is null and new.ra_deg is not null and new.dec_deg is not null'

const TRIGGERS = [
  `create trigger merge_once before insert on merge when new.event = 'merged' and ${isMerged('new.merged_id')}
    begin select raise(abort, 'a merged candidate is parted before it is merged again'); end`,
  `create trigger merge_into_kept before insert on merge when new.event = 'merged' and ${isMerged('new.kept_id')}
    begin select raise(abort, 'nothing is merged into a candidate that is merged itself'); end`,
  `create trigger merge_no_chain before insert on merge when new.event = 'merged' and exists (
      select 1 from merge held where held.kept_id = new.merged_id and held.event = 'merged'
        and not exists (select 1 from merge later where later.merged_id = held.merged_id and later.id > held.id))
    begin select raise(abort, 'a candidate that holds others is not merged'); end`,
  `create trigger merge_part before insert on merge when new.event = 'parted' and not ifnull((
      select event = 'merged' and kept_id = new.kept_id from merge
        where merged_id = new.merged_id order by id desc limit 1), 0)
    begin select raise(abort, 'only what is merged can be parted'); end`,
  `create trigger merge_in_campaign before insert on merge when exists (
      select 1 from candidate where id in (new.kept_id, new.merged_id) and campaign_id <> new.campaign_id)
    begin select raise(abort, 'candidates are merged within their campaign'); end`,
  ...(
    [
      ['merge', ['kept_id', 'merged_id']],
      ['match_decision', ['candidate_id', 'other_id']],
      ['object_match', ['candidate_id']],
      ['candidate_match', ['first_id', 'second_id']],
    ] as const
  ).map(
    ([table, columns]) => `create trigger ${table}_not_calibration before insert on ${table}
      when ${columns.map((column) => isCalibration(`new.${column}`)).join(' or ')}
      begin select raise(abort, 'calibration candidates match nothing'); end`,
  ),

  `create trigger candidate_match_due after insert on candidate when ${hasPosition}
    begin ${due}; end`,
  `create trigger candidate_match_due_again after update of ra_deg, dec_deg, truth on candidate
    when (old.ra_deg is not new.ra_deg or old.dec_deg is not new.dec_deg or old.truth is not new.truth)
      and (new.truth is null or old.truth is null)
    begin ${due}; end`,
  `create trigger candidate_matches_nothing after update of truth on candidate when new.truth is not null begin
    delete from object_match where candidate_id = new.id;
    delete from candidate_match where first_id = new.id;
    delete from candidate_match where second_id = new.id; end`,
  `create trigger candidate_of_merge_no_stamp before update of truth on candidate
    when new.truth is not null and old.truth is null
      and (exists (select 1 from merge where kept_id = new.id) or exists (select 1 from merge where merged_id = new.id))
    begin select raise(abort, 'a candidate that was merged is no calibration stamp'); end`,
  // Rows that follow from a candidate go with it.
  `create trigger candidate_unmatched before delete on candidate begin
    delete from match_due where candidate_id = old.id and campaign_id = old.campaign_id;
    delete from object_match where candidate_id = old.id;
    delete from candidate_match where first_id = old.id;
    delete from candidate_match where second_id = old.id; end`,
]

/** What is here already is matched once the server has started. */
const now = `strftime('%Y-%m-%dT%H:%M:%fZ', 'now')`
const FILL = [
  `insert into match_due select campaign_id, id from candidate
    where truth is null and ra_deg is not null and dec_deg is not null`,
  `insert into job (kind, campaign_id, unique_key, payload, run_after, created_at, updated_at)
    select 'match-candidates', campaign_id, 'match-candidates:' || campaign_id,
      json_object('campaignId', campaign_id), ${now}, ${now}, ${now} from match_due group by campaign_id`,
]

const CANDIDATE_TRIGGERS = [
  'candidate_match_due',
  'candidate_match_due_again',
  'candidate_matches_nothing',
  'candidate_of_merge_no_stamp',
  'candidate_unmatched',
]
const MADE = ['merge', 'match_decision', 'match_due', 'candidate_match', 'object_match', 'reference_object']

export async function up(db: Kysely<unknown>): Promise<void> {
  if (await hasColumn(db, 'reference_list', 'sha256')) return
  await inOneStep(db, [...TABLES, ...TRIGGERS, ...FILL])
}

export async function down(db: Kysely<unknown>): Promise<void> {
  if (!(await hasColumn(db, 'reference_list', 'sha256'))) return
  await inOneStep(db, [
    `delete from job where kind in ('match-candidates', 'match-list', 'read-list')`,
    ...CANDIDATE_TRIGGERS.map((trigger) => `drop trigger ${trigger}`),
    ...[...MADE, 'reference_list'].map((table) => `drop table ${table}`),
    'alter table campaign drop column match_radius_arcsec',
  ])
}
