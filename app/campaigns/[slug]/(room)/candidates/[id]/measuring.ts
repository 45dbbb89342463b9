import 'server-only'
import type { Kysely } from 'kysely'
import type { Measuring } from '@/components/measuring/evidence-desk'
import type { DB } from '@/db/schema'
import { listMeasurements } from '@/lib/work/measuring/list-measurements'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { saveMeasurementAction, withdrawMeasurementAction } from './measuring-actions'

/** Measurements of a candidate with what changes them; null where the reader may not see them yet. */
export async function measuringOf(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  candidateId: number,
): Promise<Measuring | null> {
  const measurements = await listMeasurements(db, permit, candidateId)
  if (!measurements) return null
  const { slug } = permit.campaign
  const { mayMeasure } = measurements
  return {
    measurements,
    save: mayMeasure ? saveMeasurementAction.bind(null, slug, candidateId) : null,
    withdraw: mayMeasure ? withdrawMeasurementAction.bind(null, slug, candidateId) : null,
  }
}
