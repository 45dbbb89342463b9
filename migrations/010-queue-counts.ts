import type { Kysely } from 'kysely'
import { hasColumn, inOneStep } from './in-one-step'

/**
 * The queue at a million candidates: how many candidates are open to whom, kept with every change that moves one; indexes by which
 * each order of the queue is walked; who makes the first pass, and what lies on their sheets.
 */

/** A candidate that a queue may hold: imaged, no calibration stamp, not decided by a ruling. */
const counted = (c: string): string => `${c}.imaged_at is not null and ${c}.truth is null
  and not exists (select 1 from ruling where ruling.id = ${c}.ruling_id and ruling.outcome in ('confirmed', 'set aside'))`

/** Everybody, as person 0, and each person who has graded it. */
const concerned = (c: string): string =>
  `select 0 as person_id union all select distinct person_id from grade where candidate_id = ${c}.id`

const BUCKET = ['imaged_at', 'truth', 'ruling_id', 'grades_given', 'settled', 'first_pass']
const moved = BUCKET.map((column) => `old.${column} is not new.${column}`).join(' or ')

const leave = `update queue_count set n = n - 1
  where campaign_id = old.campaign_id and grades_given = old.grades_given and settled = old.settled
    and first_pass = old.first_pass and person_id in (select person_id from (${concerned('old')}));`
const enter = `insert into queue_count (campaign_id, person_id, grades_given, settled, first_pass, n)
  select new.campaign_id, who.person_id, new.grades_given, new.settled, new.first_pass, 1
    from (${concerned('new')}) who where true
  on conflict do update set n = n + 1;`

const COUNTED = [
  // Open candidates by what decides whether they are lent; of person 0 all, of a person those that they have graded.
  `create table queue_count (
    campaign_id integer not null references campaign (id),
    person_id integer not null,
    grades_given integer not null,
    settled integer not null,
    first_pass text not null,
    n integer not null check (n >= 0),
    primary key (campaign_id, person_id, grades_given, settled, first_pass)
  ) strict, without rowid`,
  // Looks of a person, corrections left out.
  `create table look_count (
    campaign_id integer not null references campaign (id),
    person_id integer not null references person (id),
    occasion text not null,
    n integer not null,
    primary key (campaign_id, person_id, occasion)
  ) strict, without rowid`,
  `update candidate set first_pass = 'sent on' where exists (select 1 from grade where grade.candidate_id = candidate.id)`,
  `insert into queue_count
    select campaign_id, 0, grades_given, settled, first_pass, count(*) from candidate
      where ${counted('candidate')} group by 1, 3, 4, 5`,
  `insert into queue_count
    select candidate.campaign_id, graded.person_id, grades_given, settled, first_pass, count(*)
      from (select distinct candidate_id, person_id from grade) graded join candidate on candidate.id = graded.candidate_id
      where ${counted('candidate')} group by 1, 2, 3, 4, 5`,
  `insert into look_count
    select campaign_id, person_id, occasion, count(*) from grade where replaces is null group by 1, 2, 3`,
  `create trigger candidate_counted after insert on candidate when ${counted('new')} begin ${enter} end`,
  `create trigger candidate_uncounted after delete on candidate when ${counted('old')} begin ${leave} end`,
  `create trigger candidate_leaves_count after update of ${BUCKET.join(', ')} on candidate
    when (${moved}) and ${counted('old')} begin ${leave} end`,
  `create trigger candidate_enters_count after update of ${BUCKET.join(', ')} on candidate
    when (${moved}) and ${counted('new')} begin ${enter} end`,
  // What somebody has graded needs no first pass. It is counted before it moves.
  `create trigger grade_counted after insert on grade when new.replaces is null begin
    insert into look_count values (new.campaign_id, new.person_id, new.occasion, 1) on conflict do update set n = n + 1;
    insert into queue_count (campaign_id, person_id, grades_given, settled, first_pass, n)
      select campaign_id, new.person_id, grades_given, settled, first_pass, 1 from candidate
        where id = new.candidate_id and ${counted('candidate')} and not exists (select 1 from grade other
          where other.candidate_id = new.candidate_id and other.person_id = new.person_id and other.id <> new.id)
      on conflict do update set n = n + 1;
    update candidate set first_pass = 'sent on' where id = new.candidate_id and first_pass <> 'sent on';
  end`,
]

const WALKED = [
  'drop index candidate_queue',
  `create index candidate_queue on candidate (campaign_id, grades_given desc, first_pass, id) where imaged_at is not null`,
  `create index candidate_queue_score on candidate (campaign_id, grades_given, first_pass, ifnull(score, -1e308) desc, id)
    where imaged_at is not null`,
  `create index candidate_queue_look on candidate (campaign_id, grades_given, first_pass, look_value desc, id)
    where settled = 0 and imaged_at is not null`,
  // Spreads neighbours in intake over the whole range (Knuth, TAOCP 3, section 6.4: multiplicative hashing by 2^32 / golden ratio).
  // As a sum it serves no other query.
  `create index candidate_queue_shuffled on candidate ((campaign_id + 0), (id * 2654435769 & 4294967295))
    where imaged_at is not null`,
]

const SHEET = [
  'alter table membership add column passes integer not null default 0 check (passes in (0, 1))',
  // The newest mark of the first pass that a run read; 0 where the campaign used no sheet.
  'alter table run add column newest_sheet_mark_id integer not null default 0',
  // A candidate lies on one sheet at a time, a calibration stamp on any number.
  `create table sheet_lease (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    candidate_id integer not null references candidate (id),
    person_id integer not null references person (id),
    until text not null,
    unique (candidate_id, person_id)
  ) strict`,
  'create index sheet_lease_person on sheet_lease (campaign_id, person_id, id)',
]

export async function up(db: Kysely<unknown>): Promise<void> {
  if (await hasColumn(db, 'membership', 'passes')) return
  await inOneStep(db, [...COUNTED, ...WALKED, ...SHEET])
}

export async function down(db: Kysely<unknown>): Promise<void> {
  if (!(await hasColumn(db, 'membership', 'passes'))) return
  await inOneStep(db, [
    ...[
      'grade_counted',
      'candidate_enters_count',
      'candidate_leaves_count',
      'candidate_uncounted',
      'candidate_counted',
    ].map((trigger) => `drop trigger ${trigger}`),
    ...['sheet_lease', 'look_count', 'queue_count'].map((table) => `drop table ${table}`),
    ...['queue', 'queue_score', 'queue_look', 'queue_shuffled'].map((index) => `drop index candidate_${index}`),
    `create index candidate_queue on candidate (campaign_id, grades_given desc, id) where imaged_at is not null`,
    'alter table run drop column newest_sheet_mark_id',
    'alter table membership drop column passes',
  ])
}
