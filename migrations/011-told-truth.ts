import type { Kysely } from 'kysely'
import { hasColumn, inOneStep } from './in-one-step'

/** Calibration stamps that a manifest tells of; what was asked of one person, answered or not; a queue whose order tells nothing. */
const MADE = [
  `alter table manifest_row add column truth text check (truth in ('lens', 'not a lens'))`,
  'alter table manifest_row add column explanation text',
  'create index asked_look_of_person on asked_look (campaign_id, person_id)',
  // From then on half of the calibration stamps are for this person to practise on and never come at their bench.
  'alter table membership add column practises integer not null default 0 check (practises in (0, 1))',
  'update membership set practises = 1 where exists (select 1 from practice_answer where practice_answer.person_id = membership.person_id and practice_answer.campaign_id = membership.campaign_id)',
]

/**
 * Drawn once for each candidate and told to nobody. Among candidates that are equally wanted the queue goes by it: by number or by
 * anything that can be worked out from the number, calibration stamps would stand out among their neighbours.
 */
const SPREAD = [
  'alter table candidate add column spread integer',
  'update candidate set spread = random() & 4294967295',
  `create trigger candidate_spread after insert on candidate when new.spread is null begin
    update candidate set spread = random() & 4294967295 where id = new.id;
  end`,
]

const WALKS = ['candidate_queue', 'candidate_queue_score', 'candidate_queue_look', 'candidate_queue_shuffled']
const dropWalks = WALKS.map((index) => `drop index ${index}`)
const NUMBER_HASH = '(id * 2654435769 & 4294967295)'

/** Along the spread, or by what stands in its place. As a sum the campaign's number serves no other query. */
const walks = (rest: string, hash: string): string[] => [
  `create index candidate_queue on candidate (campaign_id, grades_given desc, first_pass, ${rest}) where imaged_at is not null`,
  `create index candidate_queue_score on candidate (campaign_id, grades_given, first_pass, ifnull(score, -1e308) desc, ${rest})
    where imaged_at is not null`,
  `create index candidate_queue_look on candidate (campaign_id, grades_given, first_pass, look_value desc, ${rest})
    where settled = 0 and imaged_at is not null`,
  `create index candidate_queue_shuffled on candidate ((campaign_id + 0), ${hash}) where imaged_at is not null`,
]

export async function up(db: Kysely<unknown>): Promise<void> {
  if (await hasColumn(db, 'manifest_row', 'truth')) return
  await inOneStep(db, [...MADE, ...dropWalks, ...SPREAD, ...walks('spread', 'spread')])
}

export async function down(db: Kysely<unknown>): Promise<void> {
  if (!(await hasColumn(db, 'manifest_row', 'truth'))) return
  await inOneStep(db, [
    ...dropWalks,
    'drop trigger candidate_spread',
    'alter table candidate drop column spread',
    ...walks('id', NUMBER_HASH),
    'alter table membership drop column practises',
    'drop index asked_look_of_person',
    'alter table manifest_row drop column explanation',
    'alter table manifest_row drop column truth',
  ])
}
