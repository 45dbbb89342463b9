import { randomUUID } from 'node:crypto'
import { permitCampaign, type Capability } from '@/lib/work/people/permission'
import type { Viewer } from '@/lib/work/people/viewer'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { changeSheet } from './change-sheet'
import type { Mark } from './first-pass'
import { recordMarks } from './record-marks'

export interface SheetScenario extends Scenario {
  ids: number[]
  mark: (person: Viewer, places: number[], mark: Mark) => ReturnType<typeof recordMarks>
  stateOf: (place: number) => Promise<string>
}

/** A campaign that uses the sheet; the first two graders are picked for the first pass. */
export async function makeSheetScenario(candidates: number, stamps = 0): Promise<SheetScenario> {
  const scenario = await makeScenario({ gradesWanted: 2, leastGrades: 1 })
  const { db, campaign, graders } = scenario
  // What is drawn for whom follows from it.
  await db.insertInto('site').values({ key: 'queue-secret', value: 'known to this test' }).execute()
  const ids: number[] = []
  for (let n = 0; n < candidates + stamps; n++) ids.push(await addImagedCandidate(db, campaign, `SWS-${n}`))
  await db
    .updateTable('candidate')
    .set({ truth: 'lens' })
    .where('id', 'in', [0, ...ids.slice(candidates)])
    .execute()
  await db
    .updateTable('campaign')
    .set({ calibration_share: stamps > 0 ? 0.5 : 0 })
    .execute()
  // Permits read the campaign anew, as requests do.
  const permit = <C extends Capability>(viewer: Viewer, capability: C) =>
    permitCampaign(db, viewer, campaign.slug, capability)
  await changeSheet(db, await permit(scenario.lead, 'lead'), {
    usesSheet: true,
    passers: [graders[0].id, graders[1].id],
  })
  return {
    ...scenario,
    permit,
    ids,
    mark: async (person, places, mark) =>
      recordMarks(
        db,
        await permit(person, 'grade'),
        places.map((place) => ({ id: randomUUID(), candidate: ids[place], mark })),
      ),
    stateOf: async (place) => {
      const row = await db.selectFrom('candidate').select('first_pass').where('id', '=', ids[place]).executeTakeFirst()
      return String(row?.first_pass)
    },
  }
}
