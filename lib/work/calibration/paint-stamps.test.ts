import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { readFits } from '@/lib/science/fits/read-fits'
import { estimateNoise } from '@/lib/science/imaging/noise'
import type { PaintingTruth } from '@/lib/science/lensing/painting/paint-lens'
import { USUAL_RANGES } from '@/lib/science/lensing/painting/painting-ranges'
import { turnPixels } from '@/lib/science/lensing/painting/turn-pixels'
import { separationArcsec } from '@/lib/science/sky/separation'
import { picturesOf } from '@/lib/work/stamps/candidate-pictures'
import { digitsOf } from './stamp-place'
import { GALAXY_NAMES, makeGalaxies, paintAndImage } from './_galaxies'
import { calibrationPage } from './calibration-page'
import { orderPainting } from './order-painting'

let room: Awaited<ReturnType<typeof makeGalaxies>>
beforeEach(async () => {
  room = await makeGalaxies()
})
afterEach(() => room.remove())

const stamps = () => room.db.selectFrom('candidate').selectAll().where('truth', 'is not', null).orderBy('id').execute()
const ordinary = () => room.db.selectFrom('candidate').selectAll().where('truth', 'is', null).orderBy('id').execute()

/** Pixels of band g of a candidate, and what they are read from. */
async function pixels(candidateId: number) {
  const { sha256 } = await room.db
    .selectFrom('plane')
    .innerJoin('file', 'file.id', 'plane.file_id')
    .select('file.sha256')
    .where('plane.candidate_id', '=', candidateId)
    .where('plane.band', '=', 'g')
    .executeTakeFirstOrThrow()
  const { images } = await readFits(await room.tools.blobs.read(sha256))
  return images[0]
}

describe('painted stamps', () => {
  it('become candidates like the others: imaged in all bands and views, named and placed like the survey', async () => {
    await paintAndImage(room, { galaxies: room.galaxies, lenses: 2, others: 1 })
    const made = await stamps()
    expect(made.map(({ truth }) => truth).sort()).toEqual(['lens', 'lens', 'not a lens'])
    const galaxies = new Map((await ordinary()).map((row) => [row.id, row]))
    for (const stamp of made) {
      expect(stamp.name).toMatch(/^SWS\d{4}$/)
      expect(GALAXY_NAMES).not.toContain(stamp.name)
      expect(Number(stamp.name.slice(3))).toBeLessThan(200)
      expect(stamp.score).toBe(0.77)
      expect(stamp.state).toBe('open')
      expect(stamp.imaged_at).not.toBeNull()
      const galaxy = galaxies.get(stamp.painted_over ?? 0)!
      // The galaxies lie 360 arcsec apart, and so far or half of it a stamp lies from the nearest; of digits it has as many.
      const own = { raDeg: stamp.ra_deg!, decDeg: stamp.dec_deg! }
      const apart = [...galaxies.values()].map((one) =>
        separationArcsec(own, { raDeg: one.ra_deg!, decDeg: one.dec_deg! }),
      )
      expect(Math.min(...apart)).toBeGreaterThan(55)
      expect(Math.min(...apart)).toBeLessThan(400)
      expect(digitsOf(own.raDeg)).toBeLessThanOrEqual(digitsOf(galaxy.ra_deg!))
      expect(digitsOf(own.decDeg)).toBeLessThanOrEqual(digitsOf(galaxy.dec_deg!))
      expect(stamp.pixel_scale_arcsec).toBeCloseTo(galaxy.pixel_scale_arcsec!, 9)
    }
    const ids = [...made.map(({ id }) => id), room.galaxies[0]]
    const pictures = await picturesOf(room.db, room.campaign, ids)
    const shapes = ids.map((id) =>
      pictures.get(id)!.views.map(({ key, label, width, height, url }) => [key, label, width, height, url !== null]),
    )
    expect(new Set(shapes.map((shape) => JSON.stringify(shape))).size).toBe(1)
    const files = await room.db.selectFrom('file').select(['name', 'fate', 'bytes']).execute()
    expect(new Set(files.map(({ fate }) => fate))).toEqual(new Set(['imaged']))
    for (const { name } of files) expect(name).toMatch(/^(SWS\d{4}|calibration-order-of-\d+)_[gri]\.fits$/)
  })

  it('hold the galaxy, turned, and the light that their truth tells', async () => {
    await paintAndImage(room, { galaxies: [room.galaxies[0]], lenses: 1 })
    const [stamp] = await stamps()
    const { turned, painted } = JSON.parse(stamp.painting!) as { turned: number; painted: PaintingTruth }
    expect(turned).toBeGreaterThanOrEqual(1)
    const before = await pixels(room.galaxies[0])
    const after = await pixels(stamp.id)
    const galaxy = turnPixels({ width: before.width, height: before.height, data: before.planes[0] }, turned)
    const light = after.planes[0].map((value, i) => value - galaxy.data[i])
    const sum = light.reduce((total, value) => total + value, 0)
    expect(Math.abs(sum / painted.bands[0].lensedFlux - 1)).toBeLessThan(0.01)
    const noise = [galaxy.data, after.planes[0]].map((data) => estimateNoise(data, before.width, before.height).sigma)
    expect(Math.abs(noise[1] / noise[0] - 1)).toBeLessThan(0.03)
    expect(stamp.explanation).toMatch(/painted over a real galaxy\. Einstein radius \d\.\d arcsec\.$/)
    expect(after.header.FILTER).toBe('g')
    expect(after.header.OBJECT).toBe(stamp.name)
  })

  it('of known non-lenses are the galaxy itself, turned', async () => {
    await paintAndImage(room, { galaxies: [room.galaxies[1]], others: 1 })
    const [stamp] = await stamps()
    expect(stamp.truth).toBe('not a lens')
    const { turned, painted } = JSON.parse(stamp.painting!) as { turned: number; painted: null }
    expect(painted).toBeNull()
    const before = await pixels(room.galaxies[1])
    const after = await pixels(stamp.id)
    expect(after.planes[0]).toEqual(
      turnPixels({ width: before.width, height: before.height, data: before.planes[0] }, turned).data,
    )
  })

  it('are made once, however often the job runs', async () => {
    const order = { galaxies: room.galaxies, lenses: 2, others: 2 }
    await paintAndImage(room, order)
    const once = await stamps()
    await paintAndImage(room, order)
    expect(await stamps()).toEqual(once)
  })

  it('are never decided and never in the catalogue', async () => {
    await paintAndImage(room, { galaxies: room.galaxies, lenses: 1 })
    const [{ id }] = await stamps()
    await expect(
      room.db.updateTable('candidate').set({ state: 'confirmed' }).where('id', '=', id).execute(),
    ).rejects.toThrow('CHECK')
  })

  it('leave out galaxies that cannot be painted over, take the next, and say so', async () => {
    const tooWide = { ...USUAL_RANGES, einsteinRadiusArcsec: [6, 7] as const }
    await paintAndImage(room, { galaxies: room.galaxies, lenses: 1, ranges: tooWide })
    expect(await stamps()).toEqual([])
    const { last, counts } = await calibrationPage(room.db, room.leadPermit)
    expect(last).toMatchObject({ made: 0, wanted: 1 })
    expect(last?.skipped).toHaveLength(4)
    expect(last?.skipped[0].reason).toContain('room for Einstein radii up to')
    expect(counts).toEqual({ lenses: 0, others: 0, waiting: 0 })
  })
})

describe('an order of calibration stamps', () => {
  const order = (galaxies: number[]) => ({ galaxies, lenses: 1, others: 0, seed: 1, ranges: USUAL_RANGES })

  it('is queued and noted', async () => {
    const { order: id } = await orderPainting(room.db, room.leadPermit, order([room.galaxies[0]]))
    expect((await calibrationPage(room.db, room.leadPermit)).work).toEqual({ done: 0, total: 0 })
    const event = await room.db
      .selectFrom('audit_event')
      .selectAll()
      .where('action', '=', 'calibration.ordered')
      .executeTakeFirstOrThrow()
    expect(event.detail).toContain(id)
  })

  it('is refused for candidates that are confirmed, of elsewhere or stamps themselves, and nothing is queued', async () => {
    await paintAndImage(room, { galaxies: [room.galaxies[0]], lenses: 1 })
    const [stamp] = await stamps()
    await room.db.updateTable('candidate').set({ state: 'confirmed' }).where('id', '=', room.galaxies[1]).execute()
    for (const bad of [stamp.id, room.galaxies[1], 999_999]) {
      await expect(orderPainting(room.db, room.leadPermit, order([room.galaxies[2], bad]))).rejects.toMatchObject({
        status: 422,
        message: expect.stringContaining('1 of the chosen candidates cannot be used'),
      })
    }
    expect((await calibrationPage(room.db, room.leadPermit)).work).toBeNull()
  })

  it('is not taken from a grader: they get no permit for it', async () => {
    await expect(room.permit(room.graders[0], 'lead')).rejects.toMatchObject({ status: 403 })
  })
})
