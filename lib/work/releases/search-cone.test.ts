import fc from 'fast-check'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { entriesInWindows } from '@/db/queries/release-cones'
import { separationArcsec } from '@/lib/science/sky/separation'
import { addReleaseAt } from '@/tests/_support/released-entries'
import { makeScenario, type Scenario } from '@/tests/_support/scenario'
import { entriesAt, searchCone, windowsOf, type Cone } from './search-cone'

let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario()
})
afterEach(() => scenario.db.destroy())

type Place = readonly [raDeg: number, decDeg: number]
const release = (places: readonly Place[], number = 1) =>
  addReleaseAt(scenario.db, scenario.campaign, scenario.lead.id, places, { number })

/** Keys of what is found, nearest first. */
async function found(releaseId: number, cone: Cone, most = 1000): Promise<string[]> {
  const { places } = await searchCone(scenario.db, releaseId, cone, most)
  const keys: string[] = []
  for await (const entry of entriesAt(scenario.db, places)) keys.push(entry.entry_key)
  return keys
}

/** The same by comparing with every one. */
const byHand = (places: readonly Place[], cone: Cone): string[] =>
  places
    .map(([raDeg, decDeg], at) => ({ key: `SWS-${at + 1}`, away: separationArcsec(cone, { raDeg, decDeg }), at }))
    .filter(({ away }) => away <= cone.radiusDeg * 3600)
    .toSorted((a, b) => a.away - b.away || a.at - b.at)
    .map(({ key }) => key)

describe('a cone over a release', () => {
  it('reaches over right ascension 0, the nearest first', async () => {
    const id = await release([
      [359.995, 10],
      [0.001, 10],
      [0.2, 10],
      [180, 10],
    ])
    expect(await found(id, { raDeg: 0, decDeg: 10, radiusDeg: 0.01 })).toEqual(['SWS-2', 'SWS-1'])
    expect(await found(id, { raDeg: 359.9999, decDeg: 10, radiusDeg: 0.01 })).toEqual(['SWS-2', 'SWS-1'])
  })

  it.each([90, -90])('goes round the pole at %i', async (pole) => {
    const sign = Math.sign(pole)
    const id = await release([
      [0, sign * 89.995],
      [120, sign * 89.996],
      [240, sign * 89.9],
      [77, pole],
    ])
    expect(await found(id, { raDeg: 300, decDeg: pole, radiusDeg: 0.01 })).toEqual(['SWS-4', 'SWS-2', 'SWS-1'])
    expect(await found(id, { raDeg: 60, decDeg: sign * 89.995, radiusDeg: 0.02 })).toContain('SWS-1')
  })

  it('has its rim', async () => {
    const id = await release([[150, 2]])
    const radiusDeg = separationArcsec({ raDeg: 150, decDeg: 2 }, { raDeg: 150, decDeg: 2.5 }) / 3600
    expect(await found(id, { raDeg: 150, decDeg: 2.5, radiusDeg })).toEqual(['SWS-1'])
  })

  it('finds what comparing with every entry finds, anywhere, at any radius', async () => {
    const place = fc.tuple(
      fc.oneof(fc.double({ min: 0, max: 359.999, noNaN: true }), fc.constantFrom(0, 1e-9, 359.999999)),
      fc.oneof(fc.double({ min: -90, max: 90, noNaN: true }), fc.constantFrom(-90, 90, 0, -0.1, 89.95)),
    )
    let number = 0
    await fc.assert(
      fc.asyncProperty(
        fc.array(place, { minLength: 1, maxLength: 40 }),
        place,
        fc.oneof(fc.double({ min: 1e-6, max: 5, noNaN: true }), fc.double({ min: 0, max: 180, noNaN: true })),
        async (places, [raDeg, decDeg], radiusDeg) => {
          const id = await release(places, ++number)
          const cone = { raDeg, decDeg, radiusDeg }
          expect(await found(id, cone)).toEqual(byHand(places, cone))
        },
      ),
      { numRuns: 60, seed: 20261201 },
    )
  })

  it('gives the nearest and says that there are more, also where there are thousands in one zone', async () => {
    const places = Array.from({ length: 9000 }, (_, k): Place => [10 + (k % 3000) / 30_000, 0.01 + k / 1e6])
    const id = await release(places)
    const cone = { raDeg: 10.05, decDeg: 0.015, radiusDeg: 1 }
    const all = byHand(places, cone)
    expect(all).toHaveLength(9000)
    expect(await found(id, cone, 7)).toEqual(all.slice(0, 7))
    expect((await searchCone(scenario.db, id, cone, 7)).overflow).toBe(true)
    expect((await searchCone(scenario.db, id, cone, 9000)).overflow).toBe(false)
    expect(await found(id, cone, 9000)).toEqual(all)
  })

  it('keeps to its own release', async () => {
    const one = await release([[150, 2]])
    await release([[150, 2]], 2)
    expect((await searchCone(scenario.db, one, { raDeg: 150, decDeg: 2, radiusDeg: 1 }, 10)).places).toHaveLength(1)
  })

  it('is found by the index of zones', async () => {
    const id = await release([[150, 2]])
    const windows = windowsOf({ raDeg: 150, decDeg: 2, radiusDeg: 0.1 })
    const plan = await scenario.db.executeQuery<{ detail: string }>(
      explain(entriesInWindows(scenario.db, id, windows, 10).compile(scenario.db)),
    )
    expect(plan.rows.map(({ detail }) => detail).join('\n')).toMatch(
      /SEARCH entry USING (COVERING )?INDEX release_entry_zone \(release_id=\? AND zone=\? AND ra_deg>\? AND ra_deg<\?\)/,
    )
  })

  it('ends when whoever asked has gone', async () => {
    const id = await release([[150, 2]])
    const gone = AbortSignal.abort()
    await expect(searchCone(scenario.db, id, { raDeg: 150, decDeg: 2, radiusDeg: 1 }, 10, gone)).rejects.toThrow(
      /abort/,
    )
  })
})

const explain = <T extends { sql: string }>(query: T): T => ({ ...query, sql: `explain query plan ${query.sql}` })
