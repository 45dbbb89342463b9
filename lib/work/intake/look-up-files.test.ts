import { createHash } from 'node:crypto'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { cutoutFits } from '@/tests/_support/cutouts'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'
import { LookUp, lookUpFiles } from './look-up-files'

let intake: IntakeScenario
beforeEach(async () => {
  intake = await makeIntake()
})
afterEach(() => intake.remove())

const lookUp = (...names: string[]) =>
  lookUpFiles(intake.db, intake.leadPermit, { look: names.map((name) => ({ name })) })

describe('what is here under a name', () => {
  it('is told in the order of the asking, by the newest bytes, and nothing for what is not here', async () => {
    const first = cutoutFits({ seed: 1 })
    const second = cutoutFits({ seed: 2 })
    await intake.deliver('north/SWS1_g.fits', first)
    await intake.deliver('north/SWS1_g.fits', second)
    const { files } = await lookUp('south/SWS1_g.fits', 'north//./SWS1_g.fits', '../x')
    const sha256 = createHash('sha256').update(second).digest('hex')
    expect(files).toEqual([null, { sha256, bytes: second.byteLength, fate: 'stored' }, null])
  })

  it('is nothing where the bytes were lost, so that they are sent again', async () => {
    await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
    await intake.db.updateTable('file').set({ fate: 'refused', fault: 'lost' }).execute()
    expect((await lookUp('SWS1_g.fits')).files).toEqual([null])
  })

  it('comes with what manifests here say of it', async () => {
    await intake.deliver('list.csv', 'file,candidate,band,ra,dec,truth\nx1.fits,SWS9,r,150.5,2.5,1\n')
    await intake.read()
    const { told } = await lookUp('night/x1.fits', 'x2.fits')
    expect(told).toEqual([{ candidate: 'SWS9', band: 'r', raDeg: 150.5, decDeg: 2.5, truth: 'lens' }, null])
  })

  it('is asked for at most 5,000 names at a time', () => {
    const look = (count: number) => LookUp.safeParse({ look: Array.from({ length: count }, () => ({ name: 'a' })) })
    expect(look(5000).success).toBe(true)
    expect(look(5001).success).toBe(false)
  })
})
