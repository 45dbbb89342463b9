import { demoFiles } from '@/fixtures/demo/demo-candidates'
import { simulateCandidate, type SimulatedKind } from '@/lib/science/lensing/simulate-candidate'
import { USUAL_RANGES } from '@/lib/science/lensing/painting/painting-ranges'
import * as imageWorker from '@/lib/work/stamps/image-worker'
import { imageCandidates } from '@/lib/work/stamps/image-candidates'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'
import { paintStamps, type PaintStampsPayload } from './paint-stamps'

const KINDS: SimulatedKind[] = ['elliptical', 'spiral', 'edge-on', 'elliptical']

export const GALAXY_NAMES = ['SWS0100', 'SWS0117', 'SWS0155', 'SWS0190']

/** A campaign with a few imaged galaxies that are no lenses, by name in GALAXY_NAMES. */
export async function makeGalaxies(names = GALAXY_NAMES): Promise<IntakeScenario & { galaxies: number[] }> {
  const intake = await makeIntake()
  for (const [k, name] of names.entries()) {
    const simulated = simulateCandidate(KINDS[k % KINDS.length], 40 + k)
    const files = demoFiles({ name, raDeg: 5 + k / 10, decDeg: 1, score: 0.9, simulated })
    for (const file of files) await intake.deliver(file.name, file.bytes)
  }
  await intake.read()
  await intake.db.updateTable('candidate').set({ score: 0.77 }).execute()
  const rows = await intake.db.selectFrom('candidate').select('id').orderBy('name').execute()
  return { ...intake, galaxies: rows.map(({ id }) => id) }
}

/** The order done, pictures and all. */
export async function paintAndImage(
  { db, tools, campaign, lead }: IntakeScenario,
  order: Partial<PaintStampsPayload> & Pick<PaintStampsPayload, 'galaxies'>,
): Promise<void> {
  const payload: PaintStampsPayload = {
    campaignId: campaign.id,
    personId: lead.id,
    order: 'order-of-test',
    seed: 5,
    ranges: USUAL_RANGES,
    lenses: 0,
    others: 0,
    ...order,
  }
  await paintStamps({ db, blobs: tools.blobs, runner: imageWorker }, payload, async () => {})
  const made = await db.selectFrom('candidate').select('id').where('imaged_at', 'is', null).execute()
  await imageCandidates(tools, { campaignId: campaign.id, candidateIds: made.map(({ id }) => id) }, async () => {})
}
