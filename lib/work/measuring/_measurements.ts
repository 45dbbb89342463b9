/** Measurements for tests. */
import { randomUUID } from 'node:crypto'
import type { SkyVector } from '@/lib/science/lensing/sis'
import type { Viewer } from '@/lib/work/people/viewer'
import type { Scenario } from '@/tests/_support/scenario'
import { MeasurementInput, type MeasuredShape } from './measurement-input'
import { recordMeasurement } from './record-measurement'
import type { RedshiftChoices } from './redshift-choice'

export function onCircle(radiusArcsec: number, count: number, centre: SkyVector = { east: 0, north: 0 }): SkyVector[] {
  return Array.from({ length: count }, (_, k) => {
    const angle = (2 * Math.PI * k) / count
    return {
      east: centre.east + radiusArcsec * Math.sin(angle),
      north: centre.north + radiusArcsec * Math.cos(angle),
    }
  })
}

export const UNKNOWN: RedshiftChoices = { lens: { basis: 'unknown' }, source: { basis: 'unknown' } }

export function measurementInput(changes: Record<string, unknown> = {}): MeasurementInput {
  const shape: MeasuredShape = { kind: 'circle', centre: 'free' }
  return MeasurementInput.parse({
    uid: randomUUID(),
    view: 'colour',
    pixelScaleArcsec: 0.2,
    points: onCircle(1.5, 8),
    shape,
    redshifts: UNKNOWN,
    remark: null,
    ...changes,
  })
}

export async function measure(
  scenario: Scenario,
  viewer: Viewer,
  candidateId: number,
  changes: Record<string, unknown> = {},
) {
  const permit = await scenario.permit(viewer, 'grade')
  return recordMeasurement(scenario.db, permit, candidateId, measurementInput(changes))
}
