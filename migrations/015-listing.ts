import type { Kysely } from 'kysely'
import { hasColumn, inOneStep } from './in-one-step'

/**
 * What the tables of candidates and of the catalogue sort and filter by, a row a candidate, kept by triggers with every change
 * that moves it, so that 100,000 rows are walked by one index or read as one narrow table; who has judged which candidate; and the
 * views that people save.
 */

const flushed = `key || case when digits = '' then '' else printf('%02d', length(ltrim(digits, '0'))) || ltrim(digits, '0') end`
/** Sorts as people count: each number in the name with its length before it, so that SWS9 comes before SWS10. */
const nameKey = (name: string): string => `(with recursive walk (rest, digits, key) as (
    select lower(${name}), '', ''
    union all
    select substr(rest, 2),
      case when substr(rest, 1, 1) between '0' and '9' then digits || substr(rest, 1, 1) else '' end,
      case when substr(rest, 1, 1) between '0' and '9' then key else ${flushed} || substr(rest, 1, 1) end
    from walk where rest <> '')
  select ${flushed} from walk where rest = '')`

/** The answers that count: of each person the newest first look or look asked for. */
const counted = (candidate: string): string => `g.candidate_id = ${candidate}
  and g.occasion in ('first', 'asked') and not exists (select 1 from grade newer
    where newer.candidate_id = g.candidate_id and newer.person_id = g.person_id
      and newer.occasion in ('first', 'asked') and newer.id > g.id)`
const included = `not coalesce((select decision.left_out from left_out decision
  where decision.campaign_id = g.campaign_id and decision.person_id = g.person_id order by decision.id desc limit 1), 0)`
const tagsOf = (answers: string): string => `(select group_concat(tag, ', ') from (
  select distinct t.value as tag from grade g, json_each(g.tags) t where ${answers} order by 1))`

/** Answers of everybody, as the table of candidates shows them. */
const answers = (candidate: string): string => `(grades, cannot_judge, tags) = (
  select count(*) filter (where g.grade <> 'U'), count(*) filter (where g.grade = 'U'), ${tagsOf(counted(candidate))}
  from grade g where ${counted(candidate)})`

/** The verdict that stands. */
const verdict = (candidate: string): string => `(outcome, mean, spread, probability) = (
  select v.outcome, v.mean, v.spread, v.probability from candidate c left join verdict v on v.id = c.verdict_id
  where c.id = ${candidate})`

/** What a candidate's state says, in the order of its life. */
const stage = `case c.state when 'open' then 0 when 'split' then 1 when 'confirmed' then 2 else 3 end`

/** As an entry of the catalogue, counted from the grades of people who are not left out. A calibration stamp never is one. */
const entry = (candidate: string): string => `
  (entered_at, decided_by, entry_grades, entry_cannot_judge, entry_mean, entry_spread, grade_class, entry_tags) = (
  select
    case when is_entry then coalesce((select e.at from entry e where e.candidate_id = listed_id and e.event = 'entered'
      order by e.id desc limit 1), state_since) end,
    cause,
    iif(is_entry, n, null), iif(is_entry, u, null), iif(is_entry, 1.0 * s / n, null),
    iif(is_entry, sqrt(max(0, n * q - s * s)) / n, null),
    -- The thresholds of grade-class.ts.
    case when is_entry then coalesce(ruled_grade,
      case when 1.0 * s / n >= 2.5 then 'A' when 1.0 * s / n >= 1.5 then 'B' when n > 0 then 'C' end) end,
    iif(is_entry, ${tagsOf(`${counted(candidate)} and ${included}`)}, null)
  from (
    select c.id as listed_id, c.state_since, c.state = 'confirmed' and c.truth is null as is_entry, iif(c.state = 'open', null, c.state_cause) as cause,
      r.grade as ruled_grade
    from candidate c left join ruling r on r.id = c.ruling_id and r.outcome <> 'by verdict' where c.id = ${candidate}),
  (select count(*) filter (where g.grade <> 'U') as n, count(*) filter (where g.grade = 'U') as u,
      sum(p.points) as s, sum(p.points * p.points) as q
    from grade g left join (select 'A' as letter, 3 as points union all select 'B', 2 union all select 'C', 1
      union all select 'N', 0) p on p.letter = g.grade
    where ${counted(candidate)} and ${included}))`

const of = (campaign: string, candidate: string): string => `campaign_id = ${campaign} and candidate_id = ${candidate}`

const SOURCES = ['ra_deg', 'dec_deg', 'score', 'lens_redshift', 'source_redshift']
const fill = (candidates: string): string => `
  insert into listing (campaign_id, candidate_id, name, name_key, is_stamp, stage, first_pass, ${SOURCES.join(', ')})
  select c.campaign_id, c.id, c.name, ${nameKey('c.name')}, c.truth is not null, ${stage}, c.first_pass,
    ${SOURCES.map((column) => `c.${column}`).join(', ')} from ${candidates}`

const everything = (candidate: string): string => `${answers(candidate)}, ${verdict(candidate)}, ${entry(candidate)}`

const changed = (columns: readonly string[]): string =>
  columns.map((column) => `old.${column} is not new.${column}`).join(' or ')

const LISTING = [
  `create table listing (
    campaign_id integer not null references campaign (id),
    candidate_id integer not null references candidate (id) on delete cascade,
    name text not null,
    name_key text not null,
    is_stamp integer not null check (is_stamp in (0, 1)),
    stage integer not null check (stage between 0 and 3),
    first_pass text not null,
    ra_deg real,
    dec_deg real,
    score real,
    lens_redshift real,
    source_redshift real,
    designation text,
    outcome text,
    mean real,
    spread real,
    probability real,
    grades integer not null default 0,
    cannot_judge integer not null default 0,
    tags text,
    decided_by text check (decided_by in ('verdict', 'ruling')),
    entered_at text,
    entry_grades integer,
    entry_cannot_judge integer,
    entry_mean real,
    entry_spread real,
    grade_class text check (grade_class in ('A', 'B', 'C')),
    entry_tags text,
    primary key (campaign_id, candidate_id)
  ) strict, without rowid`,
  fill('candidate c'),
  `update listing set designation = (select d.designation from designation d where d.candidate_id = listing.candidate_id)`,
  `update listing set ${everything('listing.candidate_id')}`,
  // Foreign keys look here when a candidate goes.
  'create index listing_candidate on listing (candidate_id)',
  ...['name_key', 'stage', 'ra_deg', 'score', 'mean', 'spread', 'probability', 'grades'].map(
    (column) => `create index listing_${column} on listing (campaign_id, ${column}, candidate_id, is_stamp)`,
  ),
  'create index listing_dec_deg on listing (campaign_id, dec_deg, candidate_id, ra_deg, is_stamp)',
  ...['lens_redshift', 'source_redshift', 'designation'].map(
    (column) =>
      `create index listing_${column} on listing (campaign_id, ${column}, candidate_id, is_stamp) where ${column} is not null`,
  ),
  ...[
    'entered_at',
    'entry_mean',
    'entry_spread',
    'entry_grades',
    'entry_cannot_judge',
    'grade_class',
    'decided_by',
  ].map(
    (column) =>
      `create index listing_as_${column} on listing (campaign_id, ${column}, candidate_id, entered_at) where entered_at is not null`,
  ),
  ...['ra_deg', 'dec_deg', 'lens_redshift', 'source_redshift', 'designation', 'probability'].map(
    (column) =>
      `create index listing_as_${column} on listing (campaign_id, ${column}, candidate_id, entered_at) where entered_at is not null`,
  ),
  'create index listing_as_name_key on listing (campaign_id, name_key, candidate_id, entered_at) where entered_at is not null',
  // Few grades have one, and people search for what is in them.
  'create index grade_remark on grade (campaign_id, candidate_id, person_id, id, occasion, remark) where remark is not null',

  `create trigger candidate_listed after insert on candidate begin
    ${fill('candidate c where c.id = new.id')};
    update listing set ${everything('new.id')} where ${of('new.campaign_id', 'new.id')};
  end`,
  `create trigger candidate_listed_again after update of name, truth, first_pass, ${SOURCES.join(', ')} on candidate
    when ${changed(['name', 'truth', 'first_pass', ...SOURCES])} begin
    update listing set name = new.name, name_key = iif(old.name = new.name, name_key, ${nameKey('new.name')}),
      is_stamp = new.truth is not null, first_pass = new.first_pass,
      ${SOURCES.map((column) => `${column} = new.${column}`).join(', ')} where ${of('new.campaign_id', 'new.id')};
  end`,
  `create trigger candidate_verdict_listed after update of verdict_id on candidate
    when ${changed(['verdict_id'])} begin
    update listing set ${verdict('new.id')} where ${of('new.campaign_id', 'new.id')};
  end`,
  `create trigger candidate_state_listed after update of state, state_cause, truth, ruling_id on candidate
    when ${changed(['state', 'state_cause', 'truth', 'ruling_id'])} begin
    update listing set stage = (select ${stage} from candidate c where c.id = new.id), ${entry('new.id')}
      where ${of('new.campaign_id', 'new.id')};
  end`,
  `create trigger grade_listed after insert on grade when new.occasion in ('first', 'asked') begin
    update listing set ${answers('new.candidate_id')} where ${of('new.campaign_id', 'new.candidate_id')};
    update listing set ${entry('new.candidate_id')} where ${of('new.campaign_id', 'new.candidate_id')}
      and entered_at is not null;
  end`,
  `create trigger left_out_listed after insert on left_out begin
    update listing set ${entry('listing.candidate_id')} where campaign_id = new.campaign_id and entered_at is not null
      and candidate_id in (select g.candidate_id from grade g
        where g.campaign_id = new.campaign_id and g.person_id = new.person_id);
  end`,
  `create trigger designation_listed after insert on designation begin
    update listing set designation = new.designation where ${of('new.campaign_id', 'new.candidate_id')};
  end`,
  `create trigger entry_listed after insert on entry when new.event = 'entered' begin
    update listing set entered_at = new.at where ${of('new.campaign_id', 'new.candidate_id')} and entered_at is not null;
  end`,
]

/** What `isOwnJudgement` of db/queries/grading.ts says of a person and a candidate. */
const judges = (person: string, candidate: string): string => `exists (select 1 from grade own
    where own.candidate_id = ${candidate} and own.person_id = ${person} and own.grade <> 'U'
      and not exists (select 1 from grade newer where newer.replaces = own.id))
  and not exists (select 1 from asked_look ask where ask.candidate_id = ${candidate} and ask.person_id = ${person}
    and ask.grade_id is null and ask.withdrawn_at is null)`

const judgedAgain = `
  delete from judged where campaign_id = new.campaign_id and person_id = new.person_id and candidate_id = new.candidate_id;
  insert into judged select new.campaign_id, new.person_id, new.candidate_id
    where ${judges('new.person_id', 'new.candidate_id')};`

const JUDGED = [
  // Who may see what was made of which candidate, because they have judged it themselves.
  `create table judged (
    campaign_id integer not null references campaign (id),
    person_id integer not null references person (id),
    candidate_id integer not null references candidate (id) on delete cascade,
    primary key (campaign_id, person_id, candidate_id)
  ) strict, without rowid`,
  'create index judged_candidate on judged (candidate_id)',
  `insert into judged select distinct g.campaign_id, g.person_id, g.candidate_id from grade g
    where ${judges('g.person_id', 'g.candidate_id')}`,
  `create trigger grade_judges after insert on grade begin ${judgedAgain} end`,
  `create trigger asked_look_judges after insert on asked_look begin ${judgedAgain} end`,
  `create trigger asked_look_judges_again after update of grade_id, withdrawn_at on asked_look begin ${judgedAgain} end`,
]

const VIEWS = [
  // A person's own; a lead may share theirs with the campaign.
  `create table saved_view (
    id integer primary key,
    campaign_id integer not null references campaign (id),
    person_id integer not null references person (id),
    page text not null check (page in ('candidates', 'catalogue')),
    name text not null collate nocase check (length(trim(name)) > 0),
    query text not null,
    shared integer not null default 0 check (shared in (0, 1)),
    created_at text not null,
    updated_at text not null,
    unique (campaign_id, person_id, page, name)
  ) strict`,
  'create index saved_view_shared on saved_view (campaign_id, page) where shared = 1',
]

const TRIGGERS = [
  'asked_look_judges_again',
  'asked_look_judges',
  'grade_judges',
  'entry_listed',
  'designation_listed',
  'left_out_listed',
  'grade_listed',
  'candidate_state_listed',
  'candidate_verdict_listed',
  'candidate_listed_again',
  'candidate_listed',
]

export async function up(db: Kysely<unknown>): Promise<void> {
  if (await hasColumn(db, 'saved_view', 'id')) return
  await inOneStep(db, [...LISTING, ...JUDGED, ...VIEWS])
}

export async function down(db: Kysely<unknown>): Promise<void> {
  if (!(await hasColumn(db, 'saved_view', 'id'))) return
  await inOneStep(db, [
    ...TRIGGERS.map((trigger) => `drop trigger ${trigger}`),
    'drop index grade_remark',
    'drop table saved_view',
    'drop table judged',
    'drop table listing',
  ])
}
