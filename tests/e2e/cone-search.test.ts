/**
 * The cone search of the running server before its usual clients: pyvo, and the cone and coneskymatch tasks of stilts; every answer before
 * votlint. Needs Debian's python3-pyvo and stilts.
 */
import { execFileSync } from 'node:child_process'
import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { votlint, xsdFaults } from '@/tests/conformance/_table-tools'
import { ENTRIES, makeReleases, placeOf, SLUG, TOKEN } from './_released'
import { makeDataFolder, removeDataFolder, startTestServer, type TestServer } from './_server'

const SCRIPT = new URL('ask-cone.py', import.meta.url).pathname
const hasPyvo = (() => {
  try {
    execFileSync('/usr/bin/python3', ['-c', 'import pyvo'], { stdio: 'ignore' })
    return true
  } catch {
    return false
  }
})()

let server: TestServer
let dataFolder = ''
let folder = ''
beforeAll(async () => {
  folder = await mkdtemp(path.join(tmpdir(), 'ringside-cones-'))
  dataFolder = await makeDataFolder()
  await makeReleases(dataFolder)
  server = await startTestServer(dataFolder)
})
afterAll(async () => {
  await server?.stop()
  await removeDataFolder(dataFolder)
  await rm(folder, { recursive: true, force: true })
})

const base = (release: number | string, key?: string) =>
  `${server.url}/r/${SLUG}/${release}/cone?${key === undefined ? '' : `key=${key}&`}`

interface PyvoAnswer {
  ids: string[]
  positions: [number, number][]
  columns: string[]
  table: number
  error?: string
  serviceError?: string
}

const askPyvo = (url: string, ra: number, dec: number, radius: number, verbosity = 2, maxrec = '-'): PyvoAnswer =>
  JSON.parse(
    execFileSync('/usr/bin/python3', [SCRIPT, url, ...[ra, dec, radius, verbosity, maxrec].map(String)], {
      encoding: 'utf8',
    }),
  ) as PyvoAnswer

const stilts = (...words: string[]) =>
  execFileSync('stilts', words, { encoding: 'utf8', stdio: ['ignore', 'pipe', 'pipe'] })
const rowsOf = (csv: string) => csv.trim().split('\n').slice(1)

async function saved(name: string, url: string): Promise<string> {
  const file = path.join(folder, name)
  await writeFile(file, Buffer.from(await (await fetch(url)).arrayBuffer()))
  return file
}

describe.skipIf(!hasPyvo)('pyvo', () => {
  it('finds what is in a cone over right ascension 0, the nearest first, at the places that were released', () => {
    const answer = askPyvo(base(2), 0, 2, 0.02)
    expect([...answer.ids].sort()).toEqual(['SWS-49', 'SWS-50', 'SWS-51', 'SWS-52', 'SWS-53'])
    expect(answer.ids[0]).toBe('SWS-51')
    for (const [at, id] of answer.ids.entries()) {
      const [ra, dec] = placeOf(Number(id.slice(4)))
      expect(answer.positions[at][0]).toBeCloseTo(ra, 9)
      expect(answer.positions[at][1]).toBeCloseTo(dec, 9)
    }
  })

  it('is given more columns the higher the verbosity', () => {
    const columns = [1, 2, 3].map((verbosity) => askPyvo(base(2), 0, 2, 0.02, verbosity).columns.length)
    expect(columns[0]).toBeLessThan(columns[1])
    expect(columns[1]).toBeLessThan(columns[2])
  })

  it('is given all of a release, or as many as it asks for', () => {
    expect(askPyvo(base(2), 0, 0, 180).table).toBe(ENTRIES)
    expect(askPyvo(base(2), 0, 0, 180, 1, '7').table).toBe(7)
    expect(askPyvo(base(2), 0, 0, 180, 1, '0').table).toBe(0)
  })

  it('finds the columns and no rows where nothing is, and for a radius of 0', () => {
    expect(askPyvo(base(2), 90, -60, 1)).toMatchObject({ ids: [], table: 0 })
    expect(askPyvo(base(2), 0, 2, 0)).toMatchObject({ ids: [], table: 0 })
  })

  it('hears in the words of the server what was wrong', () => {
    expect(askPyvo(base(2), 10, 9, 200).error).toContain('SR=200.0 is out of range: it lies between 0 and 180 degrees.')
    expect(askPyvo(base(2), 10, 9, 1, 1, 'many').error).toContain('MAXREC=many is not a number of entries.')
  })

  it('asks the newest under an address that stays, and finds no closed release', () => {
    expect(askPyvo(base('newest'), 0, 0, 180).table).toBe(ENTRIES)
    expect(askPyvo(base(5), 0, 0, 180).serviceError ?? askPyvo(base(5), 0, 0, 180).error).toBeTruthy()
    expect(askPyvo(base(3), 0, 0, 180).ids).toBeUndefined()
    expect(askPyvo(base(3, TOKEN), 0, 0, 180).table).toBe(3)
  })
})

describe('stilts', () => {
  it('asks for a cone', () => {
    const csv = stilts('cone', `serviceurl=${base(2)}`, 'lon=0', 'lat=2', 'radius=0.02', 'verb=1', 'ofmt=csv', 'out=-')
    expect(rowsOf(csv)).toHaveLength(5)
    expect(csv.split('\n')[0]).toContain('entry')
  })

  it('matches a table against the service, each row with its nearest', async () => {
    const list = path.join(folder, 'list.csv')
    await writeFile(list, `name,ra,dec\na,${placeOf(10)[0]},2.0001\nb,${placeOf(60)[0]},1.9999\nc,100,-40\n`)
    const csv = stilts(
      ...['coneskymatch', `in=${list}`, 'ifmt=csv', 'ra=ra', 'dec=dec', 'sr=0.003', 'find=best', 'verb=1'],
      ...['parallel=1', `serviceurl=${base(2)}`, 'servicetype=cone', 'ofmt=csv', 'out=-'],
    )
    expect(rowsOf(csv).map((row) => [row.split(',')[0], /SWS-\d+/.exec(row)?.[0]])).toEqual([
      ['a', 'SWS-10'],
      ['b', 'SWS-60'],
    ])
  })

  it.each([
    ['VERB=1', 'one'],
    ['VERB=3&MAXREC=5', 'five'],
    ['RESPONSEFORMAT=votable/b2', 'binary'],
    ['SR=0', 'twice'],
  ])('has nothing to say by votlint of the answer to %s', async (more, name) => {
    const file = await saved(`${name}.vot`, `${base(2)}RA=0&DEC=2&SR=1&${more}`)
    expect(votlint(file)).toBe('')
  })

  it("finds what the service says of itself valid against IVOA's schemas", async () => {
    for (const document of ['capabilities', 'availability', 'tables']) {
      const file = await saved(`${document}.xml`, `${server.url}/r/${SLUG}/newest/cone/${document}`)
      expect(xsdFaults(file)).toBe('')
    }
    expect(await readFile(path.join(folder, 'capabilities.xml'), 'utf8')).toContain(`${base('newest')}<`)
  })
})
