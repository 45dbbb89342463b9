import { describe, expect, it } from 'vitest'
import { matcher } from './match-work'

const preview = async (files: string[], manifest: string) =>
  (
    await matcher()({
      files: [...files, 'list.csv'].map((name) => ({ name, bytes: 9 })),
      manifests: [{ name: 'list.csv', file: new Blob([manifest]) }],
      chosen: {},
      pattern: '{candidate}_{band}',
      bands: ['g', 'r', 'i'],
      here: null,
    })
  ).preview

describe('what dropped files will become', () => {
  it('has the position that a line for the candidate gives, and no row more for that line', async () => {
    const { rows } = await preview(['n/SWS1_g.fits'], 'candidate,ra,dec\nSWS1,150.5,-2.5\nSWS2,1,1\n')
    expect(rows.map(({ name, candidate, raDeg, decDeg }) => [name, candidate, raDeg, decDeg])).toEqual([
      ['n/SWS1_g.fits', 'SWS1', 150.5, -2.5],
      ['list.csv', null, null, null],
      ['list.csv, line 3', 'SWS2', 1, 1],
    ])
  })

  it('says which lines name files that are not there', async () => {
    const { rows } = await preview(['x.fits'], 'file,candidate,band\nx.fits,SWS1,r\ny.fits,SWS2,r\n')
    expect(rows[0]).toMatchObject({ candidate: 'SWS1', band: 'r', problem: null })
    expect(rows[2]).toMatchObject({ name: 'list.csv, line 3', note: "Names 'y.fits', which is not among these files." })
  })

  it('has the refusals that the server would give: an unknown band, no columns, a bad line', async () => {
    const unknown = await preview(['x.fits'], 'file,candidate,band\nx.fits,SWS1,z\n')
    expect(unknown.rows[0].problem).toMatch(/^The manifest gives 'x.fits' the band 'z'/)
    const none = await preview([], 'colour\nred\n')
    expect(none.rows[0].problem).toMatch(/needs a column 'file' or 'candidate'/)
    const line = await preview([], 'candidate,score\nSWS1,high\n')
    expect(line.rows[0].problem).toBe("Line 2: score is 'high'; a score is a number.")
    expect(line.problems).toBe(1)
    expect(line.rows[1]).toMatchObject({ name: 'list.csv', note: 'Of its lines, one has a problem.' })
  })

  it('advises to correct the line of the manifest that names an unknown band', async () => {
    const { rows } = await preview(['x_g.fits'], 'file,candidate,band\ny.fits,SWS2,r\nx_g.fits,SWS1,zz\n')
    expect(rows[0].problem).toMatch(
      /the band 'zz'\. .* Correct the band in line 3 of the manifest and send it again, or/,
    )
    expect(rows[0].problem).not.toContain('with a band column')
  })

  it('says which will be calibration stamps, by file and by candidate, and counts each once', async () => {
    const { rows, stamps, candidates } = await preview(
      ['SWS1_g.fits', 'SWS1_r.fits', 'SWS2_g.fits', 'SWS3_g.fits'],
      'file,candidate,truth\n,SWS1,lens\nSWS2_g.fits,,0\n,SWS9,1\n',
    )
    expect(rows.map(({ name, truth }) => [name, truth])).toEqual([
      ['SWS1_g.fits', 'lens'],
      ['SWS1_r.fits', 'lens'],
      ['SWS2_g.fits', 'not a lens'],
      ['SWS3_g.fits', null],
      ['list.csv', null],
      ['list.csv, line 4', 'lens'],
    ])
    expect([candidates, stamps]).toEqual([3, 2])
  })

  it('shows what has a problem before what has none', async () => {
    const { rows } = await preview(['a_g.fits', 'b_r.fits'], 'file,candidate,band\nb_r.fits,SWS1,zz\n')
    expect(rows.map(({ name, problem }) => [name, problem !== null])).toEqual([
      ['b_r.fits', true],
      ['a_g.fits', false],
      ['list.csv', false],
    ])
  })
})
