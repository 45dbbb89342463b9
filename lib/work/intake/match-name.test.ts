import { describe, expect, it } from 'vitest'
import type { ManifestRow } from '@/db/schema/intake'
import { baseName } from './file-name'
import { matchName } from './match-name'
import { nameMatcher } from './name-pattern'

const GRI = ['g', 'r', 'i']
let lastId = 0

function row(fileName: string, told: Partial<ManifestRow> = {}): ManifestRow {
  return {
    id: ++lastId,
    campaign_id: 1,
    file_id: 1,
    line: 2,
    file_name: fileName,
    file_base: baseName(fileName),
    candidate: null,
    band: null,
    ra_deg: null,
    dec_deg: null,
    pixel_scale_arcsec: null,
    score: null,
    lens_redshift: null,
    source_redshift: null,
    truth: null,
    explanation: null,
    ...told,
  }
}

const match = (name: string, rows: ManifestRow[] = []) => matchName(name, nameMatcher(null, GRI), rows, GRI)

describe('a file', () => {
  it('is matched by its name without a manifest', () => {
    expect(match('SWS1_g.fits')).toMatchObject({ candidate: 'SWS1', band: 'g', refusal: null })
  })

  it('is matched by the manifest before its name', () => {
    const rows = [row('SWS1_g.fits', { candidate: 'Ring', band: 'HSC-I' })]
    expect(match('SWS1_g.fits', rows)).toMatchObject({ candidate: 'Ring', band: 'i' })
  })

  it('takes from its name what the manifest leaves open', () => {
    expect(match('SWS1_g.fits', [row('SWS1_g.fits', { candidate: 'Ring' })])).toMatchObject({
      candidate: 'Ring',
      band: 'g',
    })
  })

  it('is told apart from one of the same name in another folder', () => {
    const rows = [row('a/1.fits', { candidate: 'A', band: 'g' }), row('b/1.fits', { candidate: 'B', band: 'r' })]
    expect(match('all/b/1.fits', rows)).toMatchObject({ candidate: 'B', band: 'r' })
  })

  it('is found by its base name when the manifest has other folders or endings', () => {
    expect(match('SWS1.fits.gz', [row('/disk/cut/sws1.fits', { candidate: 'A', band: 'g' })])).toMatchObject({
      candidate: 'A',
    })
  })

  it('has the candidate of the newest line that names one', () => {
    const rows = [row('x.fits', { candidate: 'Old' }), row('x.fits', { candidate: 'New' }), row('x.fits', { score: 1 })]
    expect(match('x.fits', rows).candidate).toBe('New')
  })

  it('leaves its bands to its extensions when the manifest has a line for each of them', () => {
    const rows = GRI.map((band) => row('SWS1.fits', { candidate: 'SWS1', band }))
    expect(match('SWS1.fits', rows)).toMatchObject({ candidate: 'SWS1', band: null, refusal: null })
  })

  it('is refused when the manifest gives it a band that the campaign does not have', () => {
    const { refusal } = match('SWS1_g.fits', [row('SWS1_g.fits', { band: 'Y' })])
    expect(refusal).toMatchObject({ fault: 'no-band', reason: expect.stringContaining("'Y'") })
  })

  it('tells no candidate when neither manifest nor pattern does', () => {
    expect(match('mystery.fits').candidate).toBeNull()
  })
})
