import 'server-only'
import type { Kysely } from 'kysely'
import type { DB } from '@/db/schema'
import { knownLabels } from '@/lib/work/matching/known-labels'
import { standingMeasurements } from '@/lib/work/measuring/standing-measurements'
import type { CampaignPermit } from '@/lib/work/people/permission'

export interface KnownAs {
  name: string
  list: string
  separationArcsec: number
}

export interface MeasuredRadius {
  radiusArcsec: number
  errorArcsec: number | null
  /** people */
  count: number
}

export interface BesideRow {
  known: KnownAs[]
  einstein: MeasuredRadius | null
}

/** What other rooms know of these candidates, as far as the person may learn it. */
export async function besideRows(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  candidateIds: readonly number[],
): Promise<(id: number) => BesideRow> {
  const labels = await knownLabels(db, permit, candidateIds)
  const radii = await standingMeasurements(db, permit, candidateIds)
  return (id) => {
    const radius = radii.get(id)
    return {
      known: (labels.get(id) ?? []).map(({ name, list, separationArcsec }) => ({ name, list, separationArcsec })),
      einstein: radius
        ? { radiusArcsec: radius.einsteinRadiusArcsec, errorArcsec: radius.errorArcsec, count: radius.count }
        : null,
    }
  }
}
