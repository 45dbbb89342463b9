import { sql, type RawBuilder, type SqlBool } from 'kysely'

/** What is asked of a column's value. */
export type ColumnCondition =
  | { kind: 'contains'; parts: readonly string[] }
  | { kind: 'range'; least: number | string | null; most: number | string | null; above?: boolean; below?: boolean }
  /** Right ascensions from one eastward to the other, degrees; across 0 where `from` is the larger. */
  | { kind: 'turn'; from: number; to: number }
  | { kind: 'among'; values: readonly (string | number)[] }
  | { kind: 'missing' }
  | { kind: 'present' }

/** Degrees; the radius in arcsec, its end included. */
export interface SkyCone {
  raDeg: number
  decDeg: number
  radiusArcsec: number
  /** Half the width in right ascension of the box that holds it, degrees; 180 round a pole. */
  halfWidthDeg: number
}

export interface AskedColumn {
  value: RawBuilder<unknown>
  /** In place of `value`, where it is looked for elsewhere. */
  among?: (values: readonly (string | number)[]) => RawBuilder<SqlBool>
  contains?: (part: RawBuilder<string>) => RawBuilder<SqlBool>
}

const pattern = (part: string) => sql<string>`${`%${part.replace(/[\\%_]/g, '\\$&')}%`}`

/** The plus keeps SQLite from an index that it would walk back and forth for: reading the campaign's rows in order is quicker. */
export function meets({ value, among, contains }: AskedColumn, condition: ColumnCondition): RawBuilder<SqlBool> {
  switch (condition.kind) {
    case 'missing':
      return sql`${value} is null`
    case 'present':
      return sql`${value} is not null`
    case 'among':
      if (among) return among(condition.values)
      return sql`${value} in (select value from json_each(${JSON.stringify(condition.values)}))`
    case 'contains': {
      const holds = contains ?? ((part: RawBuilder<string>) => sql<SqlBool>`${value} like ${part} escape '\\'`)
      return sql`(${sql.join(
        condition.parts.map((part) => holds(pattern(part))),
        sql` and `,
      )})`
    }
    case 'turn': {
      const { from, to } = condition
      return from <= to ? sql`+${value} between ${from} and ${to}` : sql`(${value} >= ${from} or ${value} <= ${to})`
    }
    case 'range': {
      const { least, most, above, below } = condition
      const ends: RawBuilder<SqlBool>[] = []
      if (least !== null) ends.push(above ? sql`+${value} > ${least}` : sql`+${value} >= ${least}`)
      if (most !== null) ends.push(below ? sql`+${value} < ${most}` : sql`+${value} <= ${most}`)
      return ends.length > 0 ? sql`(${sql.join(ends, sql` and `)})` : sql`${value} is not null`
    }
  }
}

const RADIANS = Math.PI / 180

/**
 * By the index of declinations, then by the box in right ascension, then exactly: the chord between two unit vectors, which grows with
 * their separation and keeps its digits for small ones.
 */
export function isWithin(campaignId: number, cone: SkyCone): RawBuilder<SqlBool> {
  const { raDeg, decDeg, radiusArcsec, halfWidthDeg } = cone
  // A little more than rounding can take away.
  const slackDeg = 1e-9
  const reachDeg = radiusArcsec / 3600 + slackDeg
  const from = raDeg - halfWidthDeg - slackDeg
  const to = raDeg + halfWidthDeg + slackDeg
  const turn = (value: number) => ((value % 360) + 360) % 360
  const box =
    halfWidthDeg >= 180
      ? sql`true`
      : from < 0 || to >= 360
        ? sql`(near.ra_deg >= ${turn(from)} or near.ra_deg <= ${turn(to)})`
        : sql`near.ra_deg between ${from} and ${to}`
  const [ra, dec] = [raDeg * RADIANS, decDeg * RADIANS]
  const [x, y, z] = [Math.cos(dec) * Math.cos(ra), Math.cos(dec) * Math.sin(ra), Math.sin(dec)]
  const chord = 2 * Math.sin(Math.min(Math.PI, (radiusArcsec / 3600) * RADIANS) / 2)
  const square = (part: RawBuilder<unknown>) => sql`(${part}) * (${part})`
  const [nearRa, nearDec] = [sql`(near.ra_deg * ${RADIANS})`, sql`(near.dec_deg * ${RADIANS})`]
  return sql`l.candidate_id in (select near.candidate_id from listing near
    where near.campaign_id = ${campaignId} and near.dec_deg between ${decDeg - reachDeg} and ${decDeg + reachDeg} and ${box}
      and ${square(sql`cos(${nearDec}) * cos(${nearRa}) - ${x}`)} + ${square(sql`cos(${nearDec}) * sin(${nearRa}) - ${y}`)}
        + ${square(sql`sin(${nearDec}) - ${z}`)} <= ${chord * chord * (1 + 1e-12)})`
}
