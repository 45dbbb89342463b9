import { sql, type Kysely } from 'kysely'
import { inOneStep } from './in-one-step'

/**
 * Grades that came when their candidate had all its looks. SQLite cannot change a check, so `grade` is made anew from its own text
 * (lang_altertable.html of SQLite's manual, section 7), with every index and trigger of its own. Triggers of other tables that read
 * it are away meanwhile, since a trigger that names a missing table stops the renaming.
 */
const WITHOUT = "occasion in ('first', 'repeat', 'asked')"
const WITH = "occasion in ('first', 'repeat', 'asked', 'late')"
const ONE_LATE = `create unique index grade_one_late on grade (candidate_id, person_id) where occasion = 'late' and replaces is null`

interface Part {
  type: string
  name: string
  sql: string
}

async function tableText(db: Kysely<unknown>): Promise<string> {
  const { rows } = await sql<Part>`select sql from sqlite_schema where type = 'table' and name = 'grade'`.execute(db)
  return rows[0].sql
}

/** Indexes and triggers of `grade`, and triggers of other tables that read it, in the order in which they were made. */
async function partsAround(db: Kysely<unknown>): Promise<Part[]> {
  const { rows } =
    await sql<Part>`select type, name, sql from sqlite_schema where sql is not null and name <> 'grade_one_late'
    and ((tbl_name = 'grade' and type in ('index', 'trigger')) or (type = 'trigger' and sql like '%grade%')) order by rowid`.execute(
      db,
    )
  return rows
}

const madeAnew = (table: string, parts: readonly Part[], rowsKept: string): string[] => [
  ...parts.filter(({ type }) => type === 'trigger').map(({ name }) => `drop trigger ${name}`),
  table.replace(/^create table "?grade"?/i, 'create table grade_made'),
  `insert into grade_made select * from grade where ${rowsKept} order by id`,
  'drop table grade',
  'alter table grade_made rename to grade',
  ...parts.map((part) => part.sql),
]

export async function up(db: Kysely<unknown>): Promise<void> {
  const table = await tableText(db)
  if (table.includes(WITH)) return
  await inOneStep(db, [...madeAnew(table.replace(WITHOUT, WITH), await partsAround(db), 'true'), ONE_LATE])
}

/** Late grades go, and with them what was counted of people who gave nothing else at a candidate. */
export async function down(db: Kysely<unknown>): Promise<void> {
  const table = await tableText(db)
  if (!table.includes(WITH)) return
  await inOneStep(db, [
    `create temp table only_late as select candidate_id, person_id from grade
      group by 1, 2 having sum(occasion <> 'late') = 0`,
    `update queue_count set n = n - (select count(*) from only_late join candidate c on c.id = only_late.candidate_id
      where only_late.person_id = queue_count.person_id and c.campaign_id = queue_count.campaign_id
        and c.grades_given = queue_count.grades_given and c.settled = queue_count.settled
        and c.first_pass = queue_count.first_pass and c.imaged_at is not null and c.truth is null
        and not exists (select 1 from ruling where ruling.id = c.ruling_id and ruling.outcome in ('confirmed', 'set aside')))
      where person_id in (select person_id from only_late)`,
    'drop table only_late',
    "delete from look_count where occasion = 'late'",
    ...madeAnew(table.replace(WITH, WITHOUT), await partsAround(db), "occasion <> 'late'"),
  ])
}
