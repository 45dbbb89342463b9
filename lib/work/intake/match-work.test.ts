import { describe, expect, it, vi } from 'vitest'
import { matcher, type MatchWork } from './match-work'

const LINES = 'name,other,file\nSWS1,SWS9,a.fits\n'

/** A file that counts how often it is read. As a thread gets it: another object with each question. */
function sent(text: string, lastModified = 1): { file: () => File; reads: () => number } {
  let reads = 0
  return {
    file: () => {
      const file = new File([text], 'm.csv', { lastModified })
      const read = file.arrayBuffer.bind(file)
      file.arrayBuffer = vi.fn(async () => {
        reads++
        return read()
      })
      return file
    },
    reads: () => reads,
  }
}

const ask = (file: Blob, chosen: MatchWork['chosen'] = {}, pattern = ''): MatchWork => ({
  files: [
    { name: 'm.csv', bytes: 10 },
    { name: 'a.fits', bytes: 10 },
  ],
  manifests: [{ name: 'm.csv', file }],
  chosen,
  pattern,
  bands: ['g'],
  here: null,
})
const candidateOf = (done: Awaited<ReturnType<ReturnType<typeof matcher>>>) =>
  done.preview.rows.find(({ name }) => name === 'a.fits')?.candidate

describe('a manifest in hand', () => {
  it('is read once, however often columns and pattern change', async () => {
    const match = matcher()
    const { file, reads } = sent(LINES)
    expect(candidateOf(await match(ask(file(), { 'm.csv': { candidate: 'name' } })))).toBe('SWS1')
    expect(candidateOf(await match(ask(file(), { 'm.csv': { candidate: 'other' } })))).toBe('SWS9')
    expect(candidateOf(await match(ask(file(), { 'm.csv': { candidate: 'other' } }, '{candidate}-{band}')))).toBe(
      'SWS9',
    )
    expect(reads()).toBe(1)
  })

  it('is read again where a corrected one of the same name and size takes its place', async () => {
    const match = matcher()
    const [first, second] = [sent(LINES), sent(LINES.replace('SWS1', 'SWS2'), 2)]
    const chosen = { 'm.csv': { candidate: 'name' } }
    expect(candidateOf(await match(ask(first.file(), chosen)))).toBe('SWS1')
    expect(candidateOf(await match(ask(second.file(), chosen)))).toBe('SWS2')
    expect(second.reads()).toBe(1)
  })

  it('that has neither time nor name is never taken for another', async () => {
    const match = matcher()
    expect(candidateOf(await match(ask(new Blob([LINES]), { 'm.csv': { candidate: 'name' } })))).toBe('SWS1')
    const other = new Blob([LINES.replace('SWS1', 'SWS3')])
    expect(candidateOf(await match(ask(other, { 'm.csv': { candidate: 'name' } })))).toBe('SWS3')
  })
})
