import { afterEach, beforeEach, expect, it } from 'vitest'
import { insertCalibrationStamp } from '@/db/queries/calibration'
import { upsertCandidates } from '@/db/queries/cutouts'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { separationArcsec } from '@/lib/science/sky/separation'
import { makeScenario, type Scenario } from '@/tests/_support/scenario'
import { digitsOf, placeLike } from './stamp-place'

const NOW = '2026-12-01T12:00:00.000Z'

let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario()
})
afterEach(() => scenario.db.destroy())

const candidates = (count: number) =>
  Array.from({ length: count }, (_, n) => ({
    name: `SWS${n}`,
    raDeg: 150 + n / 1000,
    decDeg: 2,
    pixelScaleArcsec: 0.2,
    score: null,
    lensRedshift: null,
    sourceRedshift: null,
    imagedAt: NOW,
  }))

async function addStamp(name: string, galaxy: number) {
  return insertCalibrationStamp(
    scenario.db,
    {
      campaignId: scenario.campaign.id,
      name,
      raDeg: 150,
      decDeg: 2,
      pixelScaleArcsec: 0.2,
      lensRedshift: null,
      sourceRedshift: null,
      truth: 'lens',
      score: null,
      paintedOver: galaxy,
      painting: {},
      explanation: 'An arc.',
      now: NOW,
    },
    [],
  )
}

it('stamps made later have numbers among those of the candidates, which intake leaves free here and there', async () => {
  const { db, campaign } = scenario
  const ids = [...(await upsertCandidates(db, campaign.id, candidates(400), NOW)).values()].toSorted((a, b) => a - b)
  const [least, most] = [ids[0], ids.at(-1) ?? 0]
  // Binomial: 50 of 400 on average, five standard deviations are 33.
  expect(most - least + 1 - ids.length).toBeGreaterThan(17)
  expect(most - least + 1 - ids.length).toBeLessThan(83)
  const stamps: number[] = []
  for (let n = 0; n < 12; n++) stamps.push(await addStamp(`STAMP${n}`, ids[n]))
  for (const id of stamps) {
    expect(id).toBeGreaterThan(least)
    expect(id).toBeLessThan(most)
    expect(ids).not.toContain(id)
  }
  expect(stamps.toSorted((a, b) => a - b)).not.toEqual(stamps)
})

it('where nothing is left free they come behind the last, and candidates that come again keep their numbers', async () => {
  const { db, campaign } = scenario
  const first = await upsertCandidates(db, campaign.id, candidates(1), NOW)
  const id = first.get('SWS0') ?? 0
  expect(await addStamp('STAMP', id)).toBeGreaterThan(id)
  expect((await upsertCandidates(db, campaign.id, candidates(1), NOW)).get('SWS0')).toBe(id)
})

it('a place for a stamp is as far from the nearest candidate as candidates are from theirs, in as many digits', () => {
  const random = new SeededRandom(7)
  const field = Array.from({ length: 60 }, () => ({ raDeg: random.between(149, 151), decDeg: random.between(1, 3) }))
  const nearest = (one: { raDeg: number; decDeg: number }) =>
    Math.min(...field.filter((other) => other !== one).map((other) => separationArcsec(one, other)))
  const own = field.map(nearest).toSorted((a, b) => a - b)
  const places = Array.from({ length: 200 }, () => placeLike(field, { ra: 5, dec: 4 }, random)!)
  const theirs = places.map(nearest).toSorted((a, b) => a - b)
  const middle = (sorted: number[]) => sorted[Math.floor(sorted.length / 2)]
  expect(middle(theirs) / middle(own)).toBeGreaterThan(0.4)
  expect(middle(theirs) / middle(own)).toBeLessThan(1.6)
  for (const { raDeg, decDeg } of places) {
    expect(String(raDeg).split('.')[1]?.length ?? 0).toBeLessThanOrEqual(5)
    expect(String(decDeg).split('.')[1]?.length ?? 0).toBeLessThanOrEqual(4)
  }
  expect(placeLike([], { ra: 5, dec: 4 }, random)).toBeNull()
  expect([digitsOf(150.1), digitsOf(5.326563445385261)]).toEqual([4, 15])
})
