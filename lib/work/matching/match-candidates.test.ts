import { readFileSync } from 'node:fs'
import fc from 'fast-check'
import type { Kysely } from 'kysely'
import { describe, expect, it } from 'vitest'
import type { DB } from '@/db/schema'
import { matchPositions, matchWithin } from '@/lib/science/sky/match-positions'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { addList, match } from './_matching-scenario'
import { matchList } from './match-candidates'

const objectMatches = (db: Kysely<DB>) =>
  db.selectFrom('object_match').selectAll().orderBy('candidate_id').orderBy('row_number').execute()
const candidateMatches = (db: Kysely<DB>) =>
  db.selectFrom('candidate_match').selectAll().orderBy('first_id').orderBy('second_id').execute()

type Place = [raDeg: number, decDeg: number]
const arrays = (places: readonly Place[]) => ({
  raDeg: Float64Array.from(places, ([ra]) => ra),
  decDeg: Float64Array.from(places, ([, dec]) => dec),
})

async function addPlaced(scenario: Pick<Scenario, 'db' | 'campaign'>, places: readonly Place[], prefix = 'C') {
  const ids: number[] = []
  for (const [index, [raDeg, decDeg]] of places.entries()) {
    ids.push(await addImagedCandidate(scenario.db, scenario.campaign, `${prefix}${index}`, { raDeg, decDeg }))
  }
  return ids
}

// Crowded where it is hard: both poles, RA 0/360, and one small field.
const ra = fc.double({ min: 0, max: 359.999999999, noNaN: true })
const place = fc.oneof(
  fc.tuple(ra, fc.double({ min: 89.999, max: 90, noNaN: true })),
  fc.tuple(ra, fc.double({ min: -90, max: -89.999, noNaN: true })),
  fc.tuple(fc.double({ min: 0, max: 0.001, noNaN: true }), fc.double({ min: -0.001, max: 0.001, noNaN: true })),
  fc.tuple(
    fc.double({ min: 359.999, max: 359.9999999, noNaN: true }),
    fc.double({ min: -0.001, max: 0.001, noNaN: true }),
  ),
  fc.tuple(fc.double({ min: 200, max: 200.001, noNaN: true }), fc.double({ min: 60, max: 60.001, noNaN: true })),
)
const places = fc.array(place, { maxLength: 25 })

describe('matching by the database', () => {
  // fixtures/sky/matching.json: mpmath with 50 digits and astropy 5.2.1. Radii of lists end at 600 arcsec.
  const { rows } = JSON.parse(readFileSync('fixtures/sky/matching.json', 'utf8')) as {
    rows: Record<
      'case' | 'ra1_deg' | 'dec1_deg' | 'ra2_deg' | 'dec2_deg' | 'high_precision_separation_arcsec',
      number
    >[]
  }
  const turn = (raDeg: number) => ((raDeg % 360) + 360) % 360
  const near = rows.filter((row) => row.high_precision_separation_arcsec < 599)

  it('has hard cases to go by', () => expect(near.length).toBeGreaterThan(5))

  it.each(near)('gives the separation of the reference within 1e-9 arcsec: $case', async (row) => {
    const separation = row.high_precision_separation_arcsec
    const scenario = await makeScenario({}, 0)
    const { db, campaign } = scenario
    await addPlaced(scenario, [[turn(row.ra1_deg), row.dec1_deg]])
    await addList(scenario, [{ raDeg: turn(row.ra2_deg), decDeg: row.dec2_deg }], {
      radiusArcsec: Math.max(1e-6, separation + 1e-9),
    })
    await match(db, campaign.id)
    const found = await objectMatches(db)
    expect(found).toHaveLength(1)
    expect(Math.abs(found[0].separation_arcsec - separation)).toBeLessThan(1e-9)
    await db.destroy()
  })

  it('finds the pairs that lib/science finds, with the same separations, at poles and at RA 0/360', async () => {
    const radius = fc.constantFrom(0.500001, 2.000001, 7.3, 60.1, 599.7)
    await fc.assert(
      fc.asyncProperty(places, places, radius, async (own, known, radiusArcsec) => {
        const scenario = await makeScenario({}, 0)
        const { db, campaign } = scenario
        await db.updateTable('campaign').set({ match_radius_arcsec: radiusArcsec }).execute()
        const ids = await addPlaced(scenario, own)
        if (known.length > 0) {
          const objects = known.map(([raDeg, decDeg]) => ({ raDeg, decDeg }))
          await addList(scenario, objects, { radiusArcsec })
        }
        await match(db, campaign.id)
        const expected = matchPositions(arrays(own), arrays(known), radiusArcsec)
        const found = await objectMatches(db)
        expect(found.map((row) => [row.candidate_id, row.row_number])).toEqual(
          Array.from(expected.first, (first, k) => [ids[first], expected.second[k] + 1]),
        )
        found.forEach((row, k) => expect(row.separation_arcsec).toBeCloseTo(expected.separationArcsec[k], 9))
        const within = matchWithin(arrays(own), radiusArcsec)
        const pairs = await candidateMatches(db)
        expect(pairs.map((row) => [row.first_id, row.second_id])).toEqual(
          Array.from(within.first, (first, k) => [ids[first], ids[within.second[k]]]),
        )
        await db.destroy()
      }),
      { numRuns: 40 },
    )
  }, 60_000)

  it('matches again what has moved, and only that', async () => {
    const scenario = await makeScenario({}, 0)
    const { db, campaign } = scenario
    const [a, b] = await addPlaced(scenario, [
      [10, 5],
      [10.0001, 5],
    ])
    await addList(scenario, [{ raDeg: 10, decDeg: 5 }])
    await match(db, campaign.id)
    expect(await candidateMatches(db)).toHaveLength(1)
    expect((await objectMatches(db)).map((row) => row.candidate_id)).toEqual([a, b])
    expect(await db.selectFrom('match_due').selectAll().execute()).toEqual([])
    await db.updateTable('candidate').set({ ra_deg: 40 }).where('id', '=', b).execute()
    await db.updateTable('candidate').set({ score: 0.5, ra_deg: 10 }).where('id', '=', a).execute()
    expect(await db.selectFrom('match_due').select('candidate_id').execute()).toEqual([{ candidate_id: b }])
    await match(db, campaign.id)
    expect(await candidateMatches(db)).toEqual([])
    expect((await objectMatches(db)).map((row) => row.candidate_id)).toEqual([a])
    await db.destroy()
  })

  it('finds the same place in another campaign, within the larger of the two radii', async () => {
    const scenario = await makeScenario({}, 0)
    const { db, campaign, otherCampaign } = scenario
    const [here] = await addPlaced(scenario, [[359.9999, 10]])
    const [there] = await addPlaced({ db, campaign: otherCampaign }, [[0.0002, 10]])
    await match(db, campaign.id)
    expect(await candidateMatches(db)).toMatchObject([
      { first_id: here, second_id: there, first_campaign_id: campaign.id, second_campaign_id: otherCampaign.id },
    ])
    // The second campaign matches its own later and finds the pair there already.
    await match(db, otherCampaign.id)
    expect(await candidateMatches(db)).toHaveLength(1)
    await db.destroy()
  })

  it('lets calibration stamps match nothing, whenever they become one', async () => {
    const scenario = await makeScenario({}, 0)
    const { db, campaign } = scenario
    const [a, b] = await addPlaced(scenario, [
      [10, 5],
      [10, 5],
    ])
    const list = await addList(scenario, [{ raDeg: 10, decDeg: 5 }])
    await db.updateTable('candidate').set({ truth: 'lens' }).where('id', '=', b).execute()
    await match(db, campaign.id)
    expect((await objectMatches(db)).map((row) => row.candidate_id)).toEqual([a])
    expect(await candidateMatches(db)).toEqual([])
    await db.updateTable('candidate').set({ truth: 'not a lens' }).where('id', '=', a).execute()
    expect(await objectMatches(db), 'at once, before any job').toEqual([])
    await match(db, campaign.id)
    expect(await objectMatches(db)).toEqual([])
    const forced = { candidate_id: a, list_id: list, row_number: 1, separation_arcsec: 0 }
    await expect(db.insertInto('object_match').values(forced).execute()).rejects.toThrow(/calibration/)
    await db.destroy()
  })

  it('matches with one list anew when it is done twice, and leaves the other lists alone', async () => {
    const scenario = await makeScenario({}, 0)
    const { db, campaign } = scenario
    await addPlaced(scenario, [[10, 5]])
    const [first, second] = [
      await addList(scenario, [{ raDeg: 10, decDeg: 5 }]),
      await addList(scenario, [{ raDeg: 10, decDeg: 5 }], { name: 'Reed rings' }),
    ]
    await match(db, campaign.id)
    for (let times = 0; times < 2; times++) {
      await matchList(db, { id: first, campaignId: campaign.id }, async () => {})
      expect((await objectMatches(db)).map((row) => row.list_id)).toEqual([first, second])
    }
    await db.updateTable('reference_list').set({ state: 'retired' }).where('id', '=', first).execute()
    await matchList(db, { id: first, campaignId: campaign.id }, async () => {})
    expect((await objectMatches(db)).map((row) => row.list_id)).toEqual([second])
    await db.destroy()
  })

  it('is made anew from the start after it was cut off, without doubling', async () => {
    const scenario = await makeScenario({}, 0)
    const { db, campaign } = scenario
    await addPlaced(scenario, [
      [10, 5],
      [10.0001, 5],
    ])
    await match(db, campaign.id)
    const once = await candidateMatches(db)
    await db
      .insertInto('match_due')
      .expression(db.selectFrom('candidate').select(['campaign_id', 'id']))
      .execute()
    await match(db, campaign.id)
    expect(await candidateMatches(db)).toEqual(once)
    await db.destroy()
  })
})
