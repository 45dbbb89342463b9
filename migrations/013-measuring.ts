import type { Kysely } from 'kysely'
import { growsOnly, hasColumn, inOneStep } from './in-one-step'

/**
 * What people measure on a candidate's pictures: circles and ellipses through clicked points, and lens models. Rows are appended; one
 * that replaces or withdraws an earlier one names it. And the campaign's choice of cosmology: hubble_constant and omega_matter hold
 * for 'flat LCDM' only.
 */
const range = (of: 'lens' | 'source') => [
  // What the masses were worked out with: the middle of a range, or a value with its 1 sigma.
  `${of}_redshift real check (${of}_redshift > 0)`,
  `${of}_redshift_error real check (${of}_redshift_error >= 0)`,
  `${of}_redshift_low real check (${of}_redshift_low >= 0)`,
  `${of}_redshift_high real check (${of}_redshift_high > ${of}_redshift_low)`,
  `${of}_redshift_basis text check (${of}_redshift_basis in ('given', 'typed', 'assumed'))`,
]
const together = (of: 'lens' | 'source') => [
  `check ((${of}_redshift is null) = (${of}_redshift_basis is null))`,
  `check ((${of}_redshift_low is not null) = (${of}_redshift_basis is not null and ${of}_redshift_basis = 'assumed'))`,
  `check ((${of}_redshift_low is null) = (${of}_redshift_high is null))`,
]

const MADE = [
  `alter table campaign add column cosmology text not null default 'flat LCDM'
    check (cosmology in ('flat LCDM', 'Planck 2018'))`,
  `create table measurement (
    id integer primary key,
    uid text not null unique,
    campaign_id integer not null references campaign (id),
    candidate_id integer not null references candidate (id),
    person_id integer not null references person (id),
    event text not null check (event in ('measured', 'withdrawn')),
    kind text not null check (kind in ('circle', 'ellipse', 'model')),
    view text,
    recipe_version integer,
    pixel_scale_arcsec real check (pixel_scale_arcsec > 0),
    points text not null default '[]' check (json_valid(points)),
    fitted text check (fitted is null or json_valid(fitted)),
    einstein_radius_arcsec real check (einstein_radius_arcsec > 0),
    error_arcsec real check (error_arcsec > 0),
    ${[...range('lens'), ...range('source')].join(',\n    ')},
    cosmology text check (cosmology is null or json_valid(cosmology)),
    mass text check (mass is null or json_valid(mass)),
    remark text,
    replaces integer references measurement (id),
    at text not null,
    check ((event = 'measured') = (einstein_radius_arcsec is not null)),
    check ((event = 'measured') = (fitted is not null)),
    check ((event = 'measured') = (cosmology is not null)),
    check ((event = 'measured') = (view is not null)),
    check (event = 'measured' or replaces is not null),
    ${[...together('lens'), ...together('source')].join(',\n    ')}
  ) strict`,
  'create index measurement_candidate on measurement (candidate_id, id)',
  'create unique index measurement_replaces on measurement (replaces) where replaces is not null',
  'create index measurement_person on measurement (campaign_id, person_id, id)',
  ...growsOnly('measurement'),
  `create trigger measurement_of_its_campaign before insert on measurement
    when not exists (select 1 from candidate where id = new.candidate_id and campaign_id = new.campaign_id)
    begin select raise(abort, 'a measurement is of a candidate of its own campaign'); end`,
  `create trigger measurement_replaces_own before insert on measurement
    when new.replaces is not null and not exists (
      select 1 from measurement earlier where earlier.id = new.replaces and earlier.event = 'measured'
        and earlier.candidate_id = new.candidate_id and earlier.person_id = new.person_id)
    begin select raise(abort, 'a measurement replaces one of the same person and candidate'); end`,
]

export async function up(db: Kysely<unknown>): Promise<void> {
  if (await hasColumn(db, 'campaign', 'cosmology')) return
  await inOneStep(db, MADE)
}

export async function down(db: Kysely<unknown>): Promise<void> {
  if (!(await hasColumn(db, 'campaign', 'cosmology'))) return
  await inOneStep(db, ['drop table measurement', 'alter table campaign drop column cosmology'])
}
