import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { readCsv } from '@/lib/science/formats/csv'
import { cutoutFits } from '@/tests/_support/cutouts'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'
import { exportProblems } from './export-problems'

let intake: IntakeScenario
beforeEach(async () => {
  intake = await makeIntake()
})
afterEach(() => intake.remove())

async function problems(): Promise<Record<string, string>[]> {
  let text = ''
  for await (const part of (await exportProblems(intake.db, intake.leadPermit)).text) text += part
  return readCsv(text).rows.map(({ values }) => ({ ...values }))
}

describe('the list of problems', () => {
  it('has every refused file and every bad line of a manifest, not only the first few', async () => {
    const lines = Array.from({ length: 700 }, (_, index) => `SWS${index + 1},not a number`)
    await intake.deliver('list.csv', `candidate,score\n${lines.join('\n')}\n`)
    await intake.deliver('bad, really.fits', 'no FITS')
    await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
    await intake.read()
    const rows = await problems()
    expect(rows).toHaveLength(701)
    expect(rows[699]).toMatchObject({ file: 'list.csv', kind: 'manifest', fate: 'read', line: '701' })
    expect(rows[699].problem).toBe("score is 'not a number'; a score is a number.")
    expect(rows[700]).toMatchObject({ file: 'bad, really.fits', fate: 'refused', line: '' })
    expect(rows[700].problem).toBe(await intake.reasonOf('bad, really.fits'))
  })

  it('loses a file that has been corrected, and nothing else', async () => {
    await intake.deliver('SWS1_g.fits', 'no FITS')
    await intake.deliver('SWS2_g.fits', 'none either')
    await intake.read()
    expect((await problems()).map(({ file }) => file)).toEqual(['SWS1_g.fits', 'SWS2_g.fits'])
    await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
    await intake.read()
    expect((await problems()).map(({ file }) => file)).toEqual(['SWS2_g.fits'])
  })

  it('of nothing wrong is a header line', async () => {
    await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
    await intake.read()
    expect(await problems()).toEqual([])
  })
})
