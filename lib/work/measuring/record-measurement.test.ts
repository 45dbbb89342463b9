import { randomUUID } from 'node:crypto'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { fromJson, type Json } from '@/db/schema/values'
import { addPicturedCandidate } from '@/tests/_support/pictured-candidate'
import { makeScenario, type Scenario } from '@/tests/_support/scenario'
import type { Fitted } from './fitted'
import { giveGrade } from '@/lib/work/consensus/_give-grade'
import { measure, measurementInput, onCircle } from './_measurements'
import { MeasurementInput } from './measurement-input'
import { recordMeasurement } from './record-measurement'
import { withdrawMeasurement } from './withdraw-measurement'

let scenario: Scenario
let candidate: number
beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 4, leastGrades: 3 })
  candidate = await addPicturedCandidate(scenario, 'SWS-1', { grades: 'AAA' })
})
afterEach(() => scenario.db.destroy())

const rows = () => scenario.db.selectFrom('measurement').selectAll().orderBy('id').execute()

describe('a measurement', () => {
  it('is worked out from its points: a circle of 1.5 arcsec gives 1.5, with an error of the clicks', async () => {
    await measure(scenario, scenario.graders[0], candidate, { remark: ' the blue arc ' })
    const [row] = await rows()
    expect(row).toMatchObject({ kind: 'circle', view: 'colour', remark: 'the blue arc', replaces: null, mass: null })
    expect(row.einstein_radius_arcsec).toBeCloseTo(1.5, 9)
    // N. Chernov (2010): for points all round the circle the error of the radius is that of a click / sqrt(n); half a pixel, 8 points.
    expect(row.error_arcsec).toBeCloseTo(0.1 / Math.sqrt(8), 6)
    expect(fromJson(row.points)).toHaveLength(8)
  })

  it('replaces the own earlier one of its sort and keeps it; a model stands beside a circle', async () => {
    const [grader] = scenario.graders
    const first = await measure(scenario, grader, candidate)
    const second = await measure(scenario, grader, candidate, { shape: { kind: 'ellipse' } })
    const model = await measure(scenario, grader, candidate, { points: [], shape: MODEL })
    expect(second.replaced).toBe(first.id)
    expect(model.replaced).toBeNull()
    expect((await measure(scenario, grader, candidate)).replaced).toBe(second.id)
    expect((await rows()).map(({ kind }) => kind)).toEqual(['circle', 'ellipse', 'model', 'circle'])
  })

  it('that is sent again changes nothing', async () => {
    const uid = randomUUID()
    const first = await measure(scenario, scenario.graders[0], candidate, { uid })
    expect(await measure(scenario, scenario.graders[0], candidate, { uid })).toEqual(first)
    expect(await rows()).toHaveLength(1)
    await expect(measure(scenario, scenario.graders[1], candidate, { uid })).rejects.toMatchObject({
      type: 'uid-taken',
    })
  })

  it('keeps dispersion and mass in the campaign’s cosmology, with the redshifts and where they come from', async () => {
    await measure(scenario, scenario.lead, candidate, {
      points: onCircle(1.1508576, 8),
      redshifts: {
        lens: { basis: 'typed', value: 0.3, error: null },
        source: { basis: 'assumed', low: 0.9, high: 1.1 },
      },
    })
    const [row] = await rows()
    expect(row).toMatchObject({ lens_redshift: 0.3, lens_redshift_basis: 'typed', source_redshift: 1 })
    expect(row).toMatchObject({ source_redshift_low: 0.9, source_redshift_high: 1.1, source_redshift_basis: 'assumed' })
    const mass = fromJson(row.mass as Json<{ velocityDispersionKmS: { value: number }; massSolar: { value: number } }>)
    // fixtures/lensing/lensing.json, sis_einstein_radius_and_mass, second row (astropy 5.2.1, H0 70, Om 0.3).
    expect(mass.velocityDispersionKmS.value).toBeCloseTo(250, 3)
    expect(mass.massSolar.value / 234029477100).toBeCloseTo(1, 5)
    expect(JSON.parse(row.cosmology!)).toMatchObject({ hubble: 70, omegaMatter: 0.3 })
  })

  it('stands without a mass where the candidate’s own redshifts put the source before the lens', async () => {
    await scenario.db
      .updateTable('candidate')
      .set({ lens_redshift: 0.9, source_redshift: 0.5 })
      .where('id', '=', candidate)
      .execute()
    const given = { basis: 'given' }
    await measure(scenario, scenario.graders[0], candidate, { redshifts: { lens: given, source: given } })
    expect(await rows()).toMatchObject([{ lens_redshift: 0.9, source_redshift: 0.5, mass: null }])
  })

  it('of a model that was fitted is fitted again here, whatever lens was sent with the points', async () => {
    const images = [
      { east: 1.5, north: 0 },
      { east: -0.9, north: 0 },
    ]
    const shape = { ...MODEL, fit: { kind: 'sphere', pointsAre: 'images' } }
    await measure(scenario, scenario.graders[0], candidate, { points: images, shape })
    const [row] = await rows()
    // lensing.json, sis_images: a source at 0.3 behind a sphere of 1.2 arcsec has its images at 1.5 and -0.9.
    expect(row.einstein_radius_arcsec).toBeCloseTo(1.2, 6)
    const fitted = fromJson(row.fitted as Json<Fitted>)
    if (fitted.kind !== 'model') throw new Error('no model')
    expect(fitted.source.east).toBeCloseTo(0.3, 6)
    expect(fitted.residualPixels).toBeLessThan(1e-6)
    expect(fitted.images.map(({ magnification }) => magnification)).toEqual([
      expect.closeTo(5, 4),
      expect.closeTo(-3, 4),
    ])
  })
})

const MODEL = {
  kind: 'model',
  lens: { centre: { east: 0, north: 0 }, einsteinRadiusArcsec: 2, axisRatio: 0.8, positionAngleDeg: 30 },
  source: { east: 0.1, north: 0.2 },
  sourceRadiusArcsec: 0.2,
  fit: null,
}

describe('is refused, and nothing is kept,', () => {
  const refused = async (promise: Promise<unknown>, problem: Record<string, unknown>) => {
    await expect(promise).rejects.toMatchObject(problem)
    expect(await rows()).toEqual([])
  }

  it('to a grader who has not judged the candidate, and to one who could not judge', async () => {
    const fourth = scenario.graders[3]
    await refused(measure(scenario, fourth, candidate), { status: 409, type: 'grade-first' })
    const other = await addPicturedCandidate(scenario, 'SWS-2', { grades: 'AAAU' })
    await refused(measure(scenario, fourth, other), { status: 409, type: 'grade-first' })
  })

  it('to a grader who had judged when it was sent and could not judge any more when it is kept', async () => {
    const [grader] = scenario.graders
    const permit = await scenario.permit(grader, 'grade')
    const { db } = scenario
    const own = db.selectFrom('grade').select('id').where('person_id', '=', grader.id)
    const { id: replaces } = await own.where('candidate_id', '=', candidate).executeTakeFirstOrThrow()
    const between = new Proxy(db, {
      get(target, name) {
        if (name === 'transaction') {
          return () => ({
            execute: async (work: Parameters<ReturnType<typeof db.transaction>['execute']>[0]) => {
              await giveGrade(target, scenario.campaign, candidate, grader, 'U', { replaces })
              return target.transaction().execute(work)
            },
          })
        }
        const value: unknown = Reflect.get(target, name, target)
        return typeof value === 'function' ? (value.bind(target) as unknown) : value
      },
    })
    await refused(recordMeasurement(between, permit, candidate, measurementInput()), {
      status: 409,
      type: 'grade-first',
    })
  })

  it('to a viewer and to a stranger, who get no permit for it', async () => {
    await expect(scenario.permit(scenario.reader, 'grade')).rejects.toMatchObject({ status: 403 })
    await expect(scenario.permit(scenario.stranger, 'grade')).rejects.toMatchObject({ status: 404 })
  })

  it('of a candidate of another campaign', async () => {
    const permit = await scenario.permit(scenario.lead, 'grade')
    await refused(recordMeasurement(scenario.db, permit, candidate + 1000, measurementInput()), { status: 404 })
  })

  it.each([
    ['two points', { points: onCircle(1, 2) }, /needs at least 3 different points/],
    ['points on a line', { points: [0, 1, 2].map((east) => ({ east, north: 0 })) }, /lie on a straight line/],
    ['an ellipse of four points', { points: onCircle(1, 4), shape: { kind: 'ellipse' } }, /needs at least 5/],
    [
      'a source nearer than the lens',
      {
        redshifts: {
          lens: { basis: 'typed', value: 0.8, error: null },
          source: { basis: 'typed', value: 0.5, error: null },
        },
      },
      /source \(redshift 0.5\) must lie behind the lens \(redshift 0.8\)/,
    ],
    [
      'one image for a sphere',
      { points: [{ east: 1, north: 0 }], shape: { ...MODEL, fit: { kind: 'sphere', pointsAre: 'images' } } },
      /1 point gives 2 numbers/,
    ],
  ])('with %s', async (_, changes, message) => {
    await refused(measure(scenario, scenario.graders[0], candidate, changes), {
      status: 422,
      message: expect.stringMatching(message),
    })
  })

  it('when the pixel scale has changed since, or the view is no more', async () => {
    await refused(measure(scenario, scenario.lead, candidate, { pixelScaleArcsec: 0.25 }), { type: 'scale-changed' })
    await refused(measure(scenario, scenario.lead, candidate, { view: 'band:z' }), { type: 'scale-changed' })
  })

  it.each([
    [
      { redshifts: { lens: { basis: 'typed', value: -0.2, error: null }, source: { basis: 'unknown' } } },
      'The redshift of the lens must be above 0.',
    ],
    [
      { redshifts: { lens: { basis: 'typed', value: Number.NaN, error: null }, source: { basis: 'unknown' } } },
      'The redshift of the lens is not a number: write it with digits, such as 0.45.',
    ],
    [
      { redshifts: { lens: { basis: 'assumed', low: 0.8, high: 0.2 }, source: { basis: 'unknown' } } },
      'The assumed range of the lens must go from a smaller to a larger redshift.',
    ],
    [
      { points: [{ east: Number.NaN, north: 0 }] },
      'A place on the picture is two numbers of arcsec, to the east and to the north.',
    ],
  ])('with bad input: case %#', (changes, sentence) => {
    const parsed = MeasurementInput.safeParse({ ...measurementInput(), ...changes })
    expect(parsed.error?.issues.map(({ message }) => message)).toEqual([sentence])
  })
})

describe('withdrawing', () => {
  const withdraw = async (viewer = scenario.graders[0], id = 1) =>
    withdrawMeasurement(scenario.db, await scenario.permit(viewer, 'grade'), candidate, id)

  it('takes the own standing one back and keeps it; the next replaces nothing', async () => {
    const { id } = await measure(scenario, scenario.graders[0], candidate)
    await withdraw(scenario.graders[0], id)
    expect((await rows()).map(({ event }) => event)).toEqual(['measured', 'withdrawn'])
    expect((await measure(scenario, scenario.graders[0], candidate)).replaced).toBeNull()
  })

  it('is refused of somebody else’s, even to a lead, and a second time', async () => {
    const { id } = await measure(scenario, scenario.graders[0], candidate)
    await expect(withdraw(scenario.graders[1], id)).rejects.toMatchObject({ type: 'not-standing' })
    await expect(withdraw(scenario.lead, id)).rejects.toMatchObject({ type: 'not-standing' })
    await withdraw(scenario.graders[0], id)
    await expect(withdraw(scenario.graders[0], id)).rejects.toMatchObject({ type: 'not-standing' })
  })
})

it('rows are never changed, and the database refuses one that replaces another person’s', async () => {
  const { id } = await measure(scenario, scenario.graders[0], candidate)
  await expect(scenario.db.updateTable('measurement').set({ remark: 'x' }).execute()).rejects.toThrow('never changed')
  await expect(scenario.db.deleteFrom('measurement').execute()).rejects.toThrow('never changed')
  const [{ id: _, ...row }] = await rows()
  const forged = { ...row, uid: 'forged', person_id: scenario.lead.id, replaces: id }
  await expect(scenario.db.insertInto('measurement').values(forged).execute()).rejects.toThrow('same person')
  const elsewhere = { ...row, uid: 'elsewhere', campaign_id: scenario.otherCampaign.id }
  await expect(scenario.db.insertInto('measurement').values(elsewhere).execute()).rejects.toThrow('its own campaign')
})
