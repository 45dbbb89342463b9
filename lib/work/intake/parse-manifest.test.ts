import { describe, expect, it } from 'vitest'
import { parseManifest } from './parse-manifest'

const parse = (text: string) => parseManifest(new TextEncoder().encode(text))

describe('a manifest', () => {
  it('is read with its columns in any order and spelling', () => {
    const { entries, problems, refusal } = parse(
      'Filter;RA (deg);DEC_J2000;File Name;ID;PixScale;Prob;z_lens;zs\nG;3.144;-1.396;a/SWS1_g.fits;SWS1;0.2;0.97;0.41;1.9\n',
    )
    expect(refusal).toBeNull()
    expect(problems).toEqual([])
    expect(entries).toEqual([
      {
        line: 2,
        fileName: 'a/SWS1_g.fits',
        fileBase: 'SWS1_g',
        candidate: 'SWS1',
        band: 'G',
        raDeg: 3.144,
        decDeg: -1.396,
        pixelScaleArcsec: 0.2,
        score: 0.97,
        lensRedshift: 0.41,
        sourceRedshift: 1.9,
        truth: null,
        explanation: null,
      },
    ])
  })

  it('takes sexagesimal positions: 12 hours are 180 degrees', () => {
    const [entry] = parse('name,ra,dec\nSWS1,12:00:00,-01:30:00\n').entries
    expect(entry).toMatchObject({ raDeg: 180, decDeg: -1.5, fileName: null })
  })

  it('takes a line without what cannot be used, and says what and where', () => {
    const { entries, problems } = parse('name,ra,dec,score,pixel_scale\nSWS1,abc,2,high,-1\nSWS2,150,,nan,0.2\n')
    expect(entries).toMatchObject([
      { candidate: 'SWS1', raDeg: null, decDeg: null, score: null, pixelScaleArcsec: null },
      { candidate: 'SWS2', raDeg: null, decDeg: null, score: null, pixelScaleArcsec: 0.2 },
    ])
    expect(problems).toHaveLength(4)
    expect(problems[0]).toMatch(/^Line 2: .*"abc"/)
    expect(problems[1]).toMatch(/^Line 2: pixel_scale is '-1'/)
    expect(problems[2]).toMatch(/^Line 2: score is 'high'/)
    expect(problems[3]).toMatch(/^Line 3: it has a right ascension without a declination/)
  })

  it('says where a source does not lie behind its lens, and keeps both as they are', () => {
    const text = 'name,lens_redshift,source_redshift\nSWS1,0.9,0.5\nSWS2,0.5,0.5\nSWS3,0.5,0.9\nSWS4,0.9,\nSWS5,,0.5\n'
    const { entries, problems } = parse(text)
    expect(problems).toEqual([
      expect.stringMatching(
        /^Line 2: source_redshift 0\.5 is not above lens_redshift 0\.9: .* must lie behind the lens/,
      ),
      expect.stringMatching(/^Line 3: /),
    ])
    expect(entries[0]).toMatchObject({ lensRedshift: 0.9, sourceRedshift: 0.5 })
  })

  it('takes decimal commas where columns are parted by semicolons', () => {
    const { entries, problems } = parse('\ufeffname;ra;dec;score\r\nSWS1;10,5;-3,25;0,75\r\n')
    expect(problems).toEqual([])
    expect(entries).toMatchObject([{ candidate: 'SWS1', raDeg: 10.5, decDeg: -3.25, score: 0.75 }])
  })

  it.each([
    ['holds control characters', 'SWS\u00001'],
    ['has 201 characters', 'S'.repeat(201)],
  ])('leaves out a line whose name %s, and says so', (why, name) => {
    const { entries, problems } = parse(`name,score\n${name},0.5\nSWS2,0.6\n`)
    expect(entries.map(({ candidate }) => candidate)).toEqual(['SWS2'])
    expect(problems).toEqual([`Line 2: the name of the candidate ${why}, so that nothing is taken from it.`])
  })

  it.each([
    ['lens', ['lens', 'Lens', '1', '1.0', 'true', 'TRUE', 'yes', 'y']],
    ['not a lens', ['nonlens', 'non-lens', 'Not a lens', 'no lens', '0', '0.0', 'false', 'no', 'n']],
  ] as const)('takes %s in its usual spellings as truth', (truth, spellings) => {
    const { entries, problems } = parse(`name,Truth\n${spellings.map((word, k) => `SWS${k},${word}`).join('\n')}\n`)
    expect(problems).toEqual([])
    expect(entries.map((entry) => entry.truth)).toEqual(spellings.map(() => truth))
  })

  it('has no truth where a cell is empty, and says which word it cannot take for one', () => {
    const { entries, problems } = parse(
      'name,truth,explanation\nSWS1,,\nSWS2,maybe,A ring.\nSWS3,2,\nSWS4,1,"Arc, counter-image."\n',
    )
    expect(entries.map(({ truth }) => truth)).toEqual([null, null, null, 'lens'])
    expect(entries[3].explanation).toBe('Arc, counter-image.')
    expect(problems).toEqual([
      "Line 3: truth is 'maybe'; it is 'lens' or 'not a lens' (also 1 or 0, true or false, yes or no, nonlens). This line makes no calibration stamp.",
      expect.stringMatching(/^Line 4: truth is '2'/),
    ])
  })

  it('says where two lines tell two truths of one candidate', () => {
    const { problems } = parse('file,name,truth\na_g.fits,SWS1,1\na_r.fits,SWS1,0\nb_g.fits,SWS2,0\nb_r.fits,SWS2,0\n')
    expect(problems).toEqual(['Line 3: SWS1 is not a lens here and a lens on line 2. The last of them holds.'])
  })

  it('takes no label, class or score for a truth unless it is chosen as one', () => {
    const text = new TextEncoder().encode('name,label,class,is_lens\nSWS1,1,1,1\n')
    expect(parseManifest(text).entries[0].truth).toBeNull()
    expect(parseManifest(text, { truth: 'is_lens' }).entries[0].truth).toBe('lens')
  })

  it('leaves out an explanation that is too long, and says so', () => {
    const { entries, problems } = parse(`name,truth,explanation\nSWS1,1,${'x'.repeat(1001)}\n`)
    expect(entries[0]).toMatchObject({ truth: 'lens', explanation: null })
    expect(problems).toEqual(['Line 2: explanation has 1,001 characters; it has 1,000 at most, so it is left out.'])
  })

  it('names a line that has neither file nor candidate', () => {
    const { entries, problems } = parse('name,score\n,0.5\nSWS1,0.6\n')
    expect(entries.map(({ candidate }) => candidate)).toEqual(['SWS1'])
    expect(problems).toEqual(['Line 2: neither a file nor a candidate is named, so that nothing is taken from it.'])
  })

  it('is refused without a column for the file or the candidate, naming the columns it has', () => {
    const { entries, refusal } = parse('alpha,delta\n1,2\n')
    expect(entries).toEqual([])
    expect(refusal?.fault).toBe('no-columns')
    expect(refusal?.reason).toContain('alpha, delta')
  })

  it('is refused with its headers cut short where these are whole lines of something else', () => {
    expect(parse(`${'SIMPLE = T '.repeat(50)}\n1\n`).refusal?.reason).toMatch(/it has SIMPLE = T .{20,40}…/)
  })

  it('is refused when it is empty', () => {
    expect(parse('').refusal?.fault).toBe('no-columns')
  })
})
