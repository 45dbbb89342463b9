import type { Kysely } from 'kysely'
import { growsOnly, hasColumn, inOneStep } from './in-one-step'

/**
 * The reliability method, the estimates that follow each grade, graders who are left out, looks that are asked of people, and
 * the discussion of a candidate. SQLite cannot change a check, so `rule` is made anew.
 */
const replaceRule = (methods: string, which: string): string[] => [
  `create table rule_made (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    version integer not null,
    method text not null check (method in (${methods})),
    grades_wanted integer not null check (grades_wanted >= 1),
    least_grades integer not null check (least_grades >= 1 and least_grades <= grades_wanted),
    parameters text not null check (json_valid(parameters)),
    created_by integer not null references person (id),
    created_at text not null,
    unique (campaign_id, version)
  ) strict`,
  `insert into rule_made select * from rule where ${which}`,
  'drop table rule',
  'alter table rule_made rename to rule',
  ...growsOnly('rule'),
]

const MADE = [
  // The fitted model, and the newest decision on leaving graders out that the run read.
  'alter table run add column model text check (model is null or json_valid(model))',
  'alter table run add column newest_left_out_id integer not null default 0',

  // What a candidate's grades come to under a run's reliabilities; kept with each grade, and made again by each run.
  `create table estimate (
    candidate_id integer primary key references candidate (id),
    run_id integer not null references run (id),
    newest_grade_id integer not null,
    grades integer not null,
    cannot_judge integer not null,
    evidence real not null,
    probability real not null check (probability between 0 and 1),
    outcome text not null check (outcome in ('open', 'split', 'confirmed', 'set aside'))
  ) strict`,
  'create index estimate_run on estimate (run_id)',

  // 1 when the estimate has decided, so that no more looks are wanted; what one more look would tell, in bits.
  'alter table candidate add column settled integer not null default 0 check (settled in (0, 1))',
  'alter table candidate add column look_value real not null default 0',
  `create index candidate_look on candidate (campaign_id, look_value desc, id)
    where settled = 0 and imaged_at is not null`,

  `create table left_out (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    person_id integer not null references person (id),
    left_out integer not null check (left_out in (0, 1)),
    reason text not null check (length(trim(reason)) > 0),
    decided_by integer not null references person (id),
    created_at text not null
  ) strict`,
  'create index left_out_campaign on left_out (campaign_id, person_id, id)',
  ...growsOnly('left_out'),

  `create table asked_look (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    candidate_id integer not null references candidate (id),
    person_id integer not null references person (id),
    asked_by integer not null references person (id),
    note text,
    asked_at text not null,
    grade_id integer references grade (id),
    withdrawn_at text
  ) strict`,
  `create unique index asked_look_open on asked_look (candidate_id, person_id)
    where grade_id is null and withdrawn_at is null`,
  `create index asked_look_person on asked_look (campaign_id, person_id, id)
    where grade_id is null and withdrawn_at is null`,
  'create index asked_look_candidate on asked_look (candidate_id, id)',

  `create table message (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    candidate_id integer not null references candidate (id),
    person_id integer not null references person (id),
    body text not null check (length(trim(body)) > 0),
    created_at text not null
  ) strict`,
  'create index message_candidate on message (candidate_id, id)',
  'create index message_campaign on message (campaign_id, id)',
  ...growsOnly('message'),

  `create table mention (
    message_id integer not null references message (id),
    person_id integer not null references person (id),
    read_at text,
    primary key (message_id, person_id)
  ) strict, without rowid`,
  'create index mention_person on mention (person_id, message_id)',
]

export async function up(db: Kysely<unknown>): Promise<void> {
  if (await hasColumn(db, 'run', 'model')) return
  await inOneStep(db, [...replaceRule("'mean', 'reliability'", 'true'), ...MADE])
}

export async function down(db: Kysely<unknown>): Promise<void> {
  if (!(await hasColumn(db, 'run', 'model'))) return
  await inOneStep(db, [
    ...['mention', 'message', 'asked_look', 'left_out', 'estimate'].map((table) => `drop table ${table}`),
    'drop index candidate_look',
    'alter table candidate drop column look_value',
    'alter table candidate drop column settled',
    'alter table run drop column newest_left_out_id',
    'alter table run drop column model',
    ...replaceRule("'mean'", "method = 'mean'"),
  ])
}
