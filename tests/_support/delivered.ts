import { cutoutFits } from './cutouts'
import type { IntakeScenario } from './intake'

export const BANDS = ['g', 'r', 'i']

/** Deliveries of the usual kind, and looks at what has come of them. */
export function delivered(scenario: () => IntakeScenario) {
  async function deliverCandidates(count: number): Promise<void> {
    for (let number = 1; number <= count; number++) {
      for (const [index, band] of BANDS.entries()) {
        const position = { raDeg: 150 + number / 100, decDeg: 2.2 }
        await scenario().deliver(`north/SWS${number}_${band}.fits`, cutoutFits({ seed: 10 * number + index, position }))
      }
    }
  }

  const candidates = () => scenario().db.selectFrom('candidate').selectAll().orderBy('name').execute()
  const candidate = async (name: string) => (await candidates()).find((row) => row.name === name)
  const stampRows = () =>
    scenario()
      .db.selectFrom('stamp')
      .innerJoin('candidate', 'candidate.id', 'stamp.candidate_id')
      .select(['candidate.name', 'stamp.view', 'stamp.sha256'])
      .orderBy('candidate.name')
      .orderBy('stamp.view')
      .execute()
  const bandsOf = async (name: string) => {
    const rows = await scenario()
      .db.selectFrom('plane')
      .innerJoin('candidate', 'candidate.id', 'plane.candidate_id')
      .innerJoin('file', 'file.id', 'plane.file_id')
      .select(['plane.band', 'file.name', 'plane.file_id'])
      .where('candidate.name', '=', name)
      .orderBy('plane.band')
      .execute()
    return rows.map((row) => `${row.band} ${row.name} ${row.file_id}`)
  }
  /** Everything that reading writes, without times. */
  async function everything() {
    const { db } = scenario()
    const files = await db
      .selectFrom('file')
      .select(['id', 'name', 'fate', 'fault', 'reason', 'duplicate_of', 'replaced_by'])
      .execute()
    const planes = await db.selectFrom('plane').selectAll().orderBy('file_id').orderBy('band').execute()
    const found = (await candidates()).map(({ name, ra_deg, dec_deg, imaged_at }) => [
      name,
      ra_deg,
      dec_deg,
      imaged_at !== null,
    ])
    return {
      files,
      planes: planes.map(({ id: _, candidate_id: __, ...plane }) => plane),
      found,
      stamps: await stampRows(),
    }
  }

  return { deliverCandidates, candidates, candidate, stampRows, bandsOf, everything }
}
