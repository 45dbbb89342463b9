import { sql, type Kysely } from 'kysely'
import type { DB } from '@/db/schema'

/** Counters of the queue as the database keeps them, and as they are when candidates, grades and rulings are counted. */
export async function countersAndRecount(db: Kysely<DB>): Promise<{ kept: unknown[]; counted: unknown[] }> {
  const open = sql`candidate.imaged_at is not null and candidate.truth is null and coalesce(
    (select outcome not in ('confirmed', 'set aside') from ruling where ruling.id = candidate.ruling_id), true)`
  const queue = await sql`
    select campaign_id, person_id, grades_given, settled, first_pass, n from queue_count where n > 0 order by 1, 2, 3, 4, 5`.execute(
    db,
  )
  const queued = await sql`
    select candidate.campaign_id, who.person_id, grades_given, settled, first_pass, count(*) as n
    from candidate join (
      select id as candidate_id, 0 as person_id from candidate
      union all select distinct candidate_id, person_id from grade
    ) who on who.candidate_id = candidate.id
    where ${open} group by 1, 2, 3, 4, 5 order by 1, 2, 3, 4, 5`.execute(db)
  const looks = await sql`select campaign_id, person_id, occasion, n from look_count order by 1, 2, 3`.execute(db)
  const looked = await sql`
    select campaign_id, person_id, occasion, count(*) as n from grade where replaces is null group by 1, 2, 3 order by 1, 2, 3`.execute(
    db,
  )
  return { kept: [...queue.rows, ...looks.rows], counted: [...queued.rows, ...looked.rows] }
}
