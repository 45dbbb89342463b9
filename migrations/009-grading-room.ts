import type { Kysely } from 'kysely'
import { growsOnly, hasColumn, inOneStep } from './in-one-step'

/**
 * How a campaign's looking is ordered and measured, painted calibration stamps, practice, own candidates that come back turned,
 * and the first pass over the sheet.
 */
const MADE = [
  `alter table campaign add column queue_order text not null default 'most needed'
    check (queue_order in ('most needed', 'score', 'shuffled'))`,
  // Shares of a person's looks.
  'alter table campaign add column calibration_share real not null default 0.1 check (calibration_share between 0 and 0.5)',
  'alter table campaign add column repeat_share real not null default 0 check (repeat_share between 0 and 0.2)',
  'alter table campaign add column practice_wanted integer not null default 0 check (practice_wanted between 0 and 100)',
  'alter table campaign add column uses_sheet integer not null default 0 check (uses_sheet in (0, 1))',

  // Of calibration stamps: the galaxy a lens was painted over, what was painted, and a sentence for practice.
  'alter table candidate add column painted_over integer references candidate (id)',
  'alter table candidate add column painting text check (painting is null or json_valid(painting))',
  'alter table candidate add column explanation text',
  `create index candidate_calibration on candidate (campaign_id, id)
    where truth is not null and imaged_at is not null`,
  'create index candidate_painted_over on candidate (painted_over) where painted_over is not null',

  // Where a candidate is in the first pass; counts only in campaigns that use the sheet.
  `alter table candidate add column first_pass text not null default 'waiting'
    check (first_pass in ('waiting', 'sent on', 'dropped'))`,
  `create index candidate_first_pass on candidate (campaign_id, first_pass, id)
    where imaged_at is not null and truth is null`,
  `create table sheet_mark (
    id integer primary key,
    uid text not null unique,
    campaign_id integer not null references campaign (id),
    candidate_id integer not null references candidate (id),
    person_id integer not null references person (id),
    mark text not null check (mark in ('sent on', 'dropped', 'taken back')),
    at text not null
  ) strict`,
  'create index sheet_mark_candidate on sheet_mark (candidate_id, id)',
  'create index sheet_mark_person on sheet_mark (campaign_id, person_id, id)',
  ...growsOnly('sheet_mark'),

  `create table practice_answer (
    id integer primary key,
    uid text not null unique,
    campaign_id integer not null references campaign (id),
    candidate_id integer not null references candidate (id),
    person_id integer not null references person (id),
    grade text not null check (grade in ('A', 'B', 'C', 'N', 'U')),
    seconds real,
    given_at text not null,
    unique (candidate_id, person_id)
  ) strict`,
  'create index practice_answer_person on practice_answer (campaign_id, person_id, id)',
  ...growsOnly('practice_answer'),

  // A candidate that comes back to the person who graded it: turned by quarters (0 to 3), mirrored first from 4 on.
  `create table repeat_look (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    candidate_id integer not null references candidate (id),
    person_id integer not null references person (id),
    turned integer not null check (turned between 1 and 7),
    lent_at text not null,
    grade_id integer references grade (id),
    unique (candidate_id, person_id)
  ) strict`,
  'create index repeat_look_person on repeat_look (campaign_id, person_id, id)',
]

export async function up(db: Kysely<unknown>): Promise<void> {
  if (await hasColumn(db, 'campaign', 'queue_order')) return
  await inOneStep(db, MADE)
}

export async function down(db: Kysely<unknown>): Promise<void> {
  if (!(await hasColumn(db, 'campaign', 'queue_order'))) return
  await inOneStep(db, [
    ...['repeat_look', 'practice_answer', 'sheet_mark'].map((table) => `drop table ${table}`),
    ...['candidate_first_pass', 'candidate_painted_over', 'candidate_calibration'].map(
      (index) => `drop index ${index}`,
    ),
    ...['first_pass', 'explanation', 'painting', 'painted_over'].map(
      (column) => `alter table candidate drop column ${column}`,
    ),
    ...['uses_sheet', 'practice_wanted', 'repeat_share', 'calibration_share', 'queue_order'].map(
      (column) => `alter table campaign drop column ${column}`,
    ),
  ])
}
