import { sql, type RawBuilder, type SqlBool } from 'kysely'
import type { CandidateScope } from './catalogue'
import type { AskedColumn } from './list-conditions'
import type { ListedTable } from './listing'
import { isNamedTo } from './told-names'

export type ListColumnName =
  | 'name'
  | 'state'
  | 'grades'
  | 'cannot'
  | 'mean'
  | 'spread'
  | 'probability'
  | 'score'
  | 'ra'
  | 'dec'
  | 'designation'
  | 'class'
  | 'tags'
  | 'remark'
  | 'zlens'
  | 'zsource'
  | 'decided'
  | 'entered'
  | 'known'
  | 'calibration'

export interface ListColumn extends AskedColumn {
  /** What is sorted by, where that is not the value. */
  order?: RawBuilder<unknown>
  /** Every row has a value. */
  isAlwaysThere?: boolean
  /** Of what a reader may have to judge first: what must hold besides. */
  told?: RawBuilder<SqlBool>
  /** What must hold for a row to be sorted by it; the others come behind, by arrival. */
  sorted?: RawBuilder<SqlBool>
}

type Columns = Partial<Record<ListColumnName, ListColumn>>

/** Of a calibration stamp a grader is shown their own answer and those of people who wrote in its discussion: see `countVotes`. */
const isShown = (judgedBy: number) => sql<SqlBool>`(g.person_id = ${judgedBy} or exists (
  select 1 from message m where m.candidate_id = g.candidate_id and m.person_id = g.person_id))`

const stands = sql<SqlBool>`g.occasion in ('first', 'asked') and not exists (select 1 from grade newer
  where newer.candidate_id = g.candidate_id and newer.person_id = g.person_id
    and newer.occasion in ('first', 'asked') and newer.id > g.id)`

/** Candidates with a standing remark that holds the part. */
const remarked =
  ({ campaignId, judgedBy }: CandidateScope) =>
  (part: RawBuilder<string>) => {
    const isTold =
      judgedBy === null
        ? sql`true`
        : sql`g.candidate_id in (select judged.candidate_id from judged
            where judged.campaign_id = ${campaignId} and judged.person_id = ${judgedBy})
          and (exists (select 1 from candidate where candidate.id = g.candidate_id and candidate.truth is null)
            or ${isShown(judgedBy)})`
    return sql<SqlBool>`l.candidate_id in (select g.candidate_id from grade g
      where g.campaign_id = ${campaignId} and g.remark is not null and g.remark like ${part} escape '\\'
        and ${isTold} and ${stands})`
  }

const shownOfStamp = (judgedBy: number) => sql`g.candidate_id = l.candidate_id and ${stands} and ${isShown(judgedBy)}`

const countOfStamp = (judgedBy: number) =>
  sql`(select count(*) filter (where g.grade <> 'U') from grade g where ${shownOfStamp(judgedBy)})`

/** Written as those of candidates are: any difference would find the stamps. */
const tagsOfStamp = (judgedBy: number) => sql`(select group_concat(tag, ', ') from (
  select distinct t.value as tag from grade g, json_each(g.tags) t where ${shownOfStamp(judgedBy)} order by 1))`

/**
 * 'known' to a reference list in force; 'new' where no list whose objects are kept out of what is new knows it. A match that a lead has
 * told to be another object does not count.
 */
const knownColumn = ({ campaignId, judgedBy }: CandidateScope): ListColumn => {
  const matched = (only: RawBuilder<SqlBool>) => sql<SqlBool>`l.candidate_id in (
    select m.candidate_id from reference_list r cross join object_match m on m.list_id = r.id
    where r.campaign_id = ${campaignId} and r.state = 'ready' and ${only} and coalesce((select d.decision from match_decision d
      where d.candidate_id = m.candidate_id and d.list_id = m.list_id and d.row_number = m.row_number
      order by d.id desc limit 1), '') <> 'different')`
  const any = matched(sql`true`)
  return {
    value: sql`iif(${any}, 'known', null)`,
    among: (values) => {
      const [known, fresh] = [values.includes('known'), values.includes('new')]
      const isNew = sql<SqlBool>`not ${matched(sql`r.keeps_out_of_new = 1`)}`
      return known && fresh ? sql`(${any} or ${isNew})` : known ? any : isNew
    },
    // Calibration stamps match nothing, and look like candidates that are open.
    told: judgedBy === null ? undefined : sql<SqlBool>`l.stage > 0`,
  }
}

/**
 * The columns of a table, as this reader may use them. Of candidates that a grader has not judged nothing that was made of them is told,
 * and of judged ones no verdict that leaves them open. The catalogue holds only what the reader may see.
 */
export function listColumns(scope: CandidateScope, table: ListedTable): Columns {
  return table === 'catalogue' ? entryColumns(scope) : candidateColumns(scope)
}

function candidateColumns(scope: CandidateScope): Columns {
  const { judgedBy } = scope
  const judged = judgedBy === null ? undefined : sql<SqlBool>`true`
  const decided = judgedBy === null ? undefined : sql<SqlBool>`l.outcome <> 'open'`
  const shown = (value: RawBuilder<unknown>, ofStamp: (judgedBy: number) => RawBuilder<unknown>) =>
    judgedBy === null ? value : sql`(case when l.is_stamp then ${ofStamp(judgedBy)} else ${value} end)`
  return {
    ...PLACE,
    name: nameColumn(scope),
    state: { value: sql`l.stage`, told: judged, isAlwaysThere: true },
    grades: { value: shown(sql`l.grades`, countOfStamp), told: judged, isAlwaysThere: true },
    mean: { value: sql`l.mean`, told: decided },
    spread: { value: sql`l.spread`, told: decided },
    probability: { value: sql`l.probability`, told: decided },
    score: { value: sql`l.score` },
    designation: { value: sql`l.designation`, told: judged },
    tags: { value: shown(sql`l.tags`, tagsOfStamp), told: judged },
    remark: { value: sql`null`, contains: remarked(scope), told: judged },
    zlens: { value: sql`l.lens_redshift`, told: judged },
    zsource: { value: sql`l.source_redshift`, told: judged },
    known: knownColumn(scope),
    decided: { value: sql`l.decided_by`, told: judged },
    entered: { value: sql`l.entered_at`, told: judged },
    calibration: { value: sql`iif(l.is_stamp, 'calibration', 'candidate')` },
  }
}

/** A grader finds by name, and sorts by it, only what they are told the name of; of the rest they find the number: `candidateNumber`. */
function nameColumn({ campaignId, judgedBy }: CandidateScope): ListColumn {
  const column = { value: sql`l.name`, order: sql`l.name_key`, isAlwaysThere: true }
  if (judgedBy === null) return column
  const isNamed = isNamedTo({ campaignId, personId: judgedBy }, 'l.candidate_id')
  return { ...column, value: sql`iif(${isNamed}, l.name, 'No. ' || l.candidate_id)`, sorted: isNamed }
}

function entryColumns(scope: CandidateScope): Columns {
  return {
    ...PLACE,
    name: { value: sql`l.name`, order: sql`l.name_key`, isAlwaysThere: true },
    designation: { value: sql`(ifnull(l.designation, '') || ' ' || l.name)`, order: sql`l.designation` },
    class: { value: sql`l.grade_class` },
    grades: { value: sql`l.entry_grades` },
    cannot: { value: sql`l.entry_cannot_judge` },
    mean: { value: sql`l.entry_mean` },
    spread: { value: sql`l.entry_spread` },
    probability: { value: sql`l.probability` },
    tags: { value: sql`l.entry_tags` },
    remark: { value: sql`null`, contains: remarked(scope) },
    zlens: { value: sql`l.lens_redshift` },
    zsource: { value: sql`l.source_redshift` },
    known: knownColumn(scope),
    decided: { value: sql`l.decided_by` },
    entered: { value: sql`l.entered_at` },
  }
}

const PLACE: Columns = { ra: { value: sql`l.ra_deg` }, dec: { value: sql`l.dec_deg` } }
