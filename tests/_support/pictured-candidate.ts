import type { Insertable } from 'kysely'
import type { StampTable } from '@/db/schema/intake'
import { addJudgedCandidate, type Judged } from './judged-candidate'
import type { Scenario } from './scenario'

const NOW = '2026-02-03T04:05:06.000Z'
export const PICTURE_SIDE = 80

/** A judged candidate with one plane of 0.2 arcsec pixels and stamps of two views, so that it can be measured. */
export async function addPicturedCandidate(scenario: Scenario, name: string, judged: Judged): Promise<number> {
  const { db, campaign, lead } = scenario
  const id = await addJudgedCandidate(scenario, name, judged)
  const common = { campaign_id: campaign.id, created_by: lead.id, created_at: NOW }
  const batch = await db
    .insertInto('batch')
    .values({ ...common, name })
    .returning('id')
    .executeTakeFirstOrThrow()
  const file = await db
    .insertInto('file')
    .values({
      ...common,
      batch_id: batch.id,
      name: `${name}.fits`,
      kind: 'fits',
      sha256: name,
      bytes: 1,
      fate: 'imaged',
      fault: null,
      reason: null,
      duplicate_of: null,
      replaced_by: null,
      updated_at: NOW,
      archive_id: null,
      columns: null,
    })
    .returning('id')
    .executeTakeFirstOrThrow()
  await db
    .insertInto('plane')
    .values({
      candidate_id: id,
      band: 'g',
      file_id: file.id,
      hdu: 0,
      plane_index: 0,
      width: PICTURE_SIDE,
      height: PICTURE_SIDE,
      wcs: null,
      pixel_scale_arcsec: 0.2,
      background: 0,
      noise: 1,
    })
    .execute()
  const recipe = await db.selectFrom('recipe').select('id').executeTakeFirstOrThrow()
  const stamp = (view: string): Insertable<StampTable> => ({
    campaign_id: campaign.id,
    candidate_id: id,
    recipe_id: recipe.id,
    view,
    sha256: `${id}${view.length}`.padEnd(64, 'a'),
    bytes: 1,
    width: PICTURE_SIDE,
    height: PICTURE_SIDE,
    note: null,
  })
  await db.insertInto('stamp').values(['colour', 'band:g'].map(stamp)).execute()
  return id
}
