import type { Kysely } from 'kysely'
import { hasColumn, inOneStep } from './in-one-step'

/** Calibration stamps that a manifest tells of; what was asked of one person, answered or not. */
const MADE = [
  `alter table manifest_row add column truth text check (truth in ('lens', 'not a lens'))`,
  'alter table manifest_row add column explanation text',
  'create index asked_look_of_person on asked_look (campaign_id, person_id)',
]

export async function up(db: Kysely<unknown>): Promise<void> {
  if (await hasColumn(db, 'manifest_row', 'truth')) return
  await inOneStep(db, MADE)
}

export async function down(db: Kysely<unknown>): Promise<void> {
  if (!(await hasColumn(db, 'manifest_row', 'truth'))) return
  await inOneStep(db, [
    'drop index asked_look_of_person',
    'alter table manifest_row drop column explanation',
    'alter table manifest_row drop column truth',
  ])
}
