import { NextRequest } from 'next/server'
import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest'
import type { Viewer } from '@/lib/work/people/viewer'
import { changeAccess } from '@/lib/work/releases/change-access'
import {
  addGraded,
  makeReleaseScenario,
  publishAndMake,
  type ReleaseScenario,
} from '@/lib/work/releases/_release-scenario'
import { GET as entryJson } from './[slug]/[number]/[entryKey]/entry.json/route'
import { GET as cone } from './[slug]/[number]/cone/route'
import { GET as describeCone, OPTIONS } from './[slug]/[number]/cone/[document]/route'
import { GET as file } from './[slug]/[number]/files/[name]/route'
import { GET as stamp } from './[slug]/[number]/stamps/[sha256]/route'

let scenario: ReleaseScenario
let viewer: Viewer | null = null
vi.mock('@/lib/platform/database', () => ({ database: async () => scenario.db }))
vi.mock('@/lib/platform/storage/blobs', () => ({ blobs: () => scenario.tools.blobs }))
vi.mock('@/lib/work/people/session', () => ({ getViewer: async () => viewer }))

const FIRST = 'SWS-J100024.00+021200.0'
const SECOND = 'SWS-J100048.00+021200.0'
let token = ''
let shaOfFirst = ''

/** 1 public and withdrawn by 4, 2 public, 3 by link, 5 private. */
beforeAll(async () => {
  scenario = await makeReleaseScenario({ gradesWanted: 4, leastGrades: 3 })
  const { db, lead } = scenario
  await addGraded(scenario, 'first', 'AAAA', { raDeg: 150.1, decDeg: 2.2, remark: 'An arc & <more>' })
  await publishAndMake(scenario, { title: 'One' })
  await addGraded(scenario, 'second', 'AABA', { raDeg: 150.2, decDeg: 2.2 })
  const permit = await scenario.permit(lead, 'lead')
  const open = async (number: number, access: 'public' | 'link') =>
    (await changeAccess(db, permit, number, { access, acronymRegistered: true })).token
  await publishAndMake(scenario, { title: 'Two' })
  await publishAndMake(scenario, { title: 'Three' })
  await publishAndMake(scenario, {
    kind: 'retraction',
    corrects: '1',
    statement: 'Wrong <pixels>.',
    title: 'Four',
  } as never)
  await publishAndMake(scenario, { title: 'Five' })
  await open(1, 'public')
  await open(2, 'public')
  token = (await open(3, 'link'))!
  await open(4, 'public')
  const row = await db.selectFrom('release_entry').selectAll().where('release_id', '=', 1).executeTakeFirstOrThrow()
  shaOfFirst = row.thumbnail!
})
afterAll(() => scenario.end())
beforeEach(() => {
  viewer = null
})

type Handler = (request: NextRequest, context: { params: Promise<never> }) => Promise<Response>
const ask = (handler: unknown, path: string, params: Record<string, string>) =>
  (handler as Handler)(new NextRequest(`http://ringside.test${path}`), { params: Promise.resolve(params as never) })
const askCone = (number: string, query: string) =>
  ask(cone, `/r/north-field/${number}/cone?${query}`, { slug: 'north-field', number })
const askStamp = (number: string, sha256: string, query: string) =>
  ask(stamp, `/r/north-field/${number}/stamps/${sha256}?${query}`, { slug: 'north-field', number, sha256 })
const askFile = (number: string, name: string, query = '') =>
  ask(file, `/r/north-field/${number}/files/${name}?${query}`, { slug: 'north-field', number, name })
const askEntry = (number: string, entryKey: string, query = '') =>
  ask(entryJson, `/r/north-field/${number}/${entryKey}/entry.json?${query}`, { slug: 'north-field', number, entryKey })

const AROUND = 'RA=150.15&DEC=2.2&SR=1'

describe('the cone search of a release', () => {
  it('answers everybody with XML that any page may read', async () => {
    const response = await askCone('2', AROUND)
    expect(response.status).toBe(200)
    expect(response.headers.get('content-type')).toBe('text/xml; charset=utf-8')
    expect(response.headers.get('access-control-allow-origin')).toBe('*')
    const text = await response.text()
    expect(text).toContain(FIRST)
    expect(text).toContain(SECOND)
  })

  it('tells in its answer that the release is withdrawn', async () => {
    expect(await (await askCone('1', AROUND)).text()).toContain(
      '<INFO name="retraction" value="This release is withdrawn by release 4: Wrong &lt;pixels&gt;."/>',
    )
    expect(await (await askCone('2', AROUND)).text()).not.toContain('name="retraction"')
  })

  it('of the newest is that of the newest that stands', async () => {
    expect(await (await askCone('newest', AROUND)).text()).toContain('<TABLE name="release_2">')
  })

  it.each(['3', '5', '6', '0', '01', '1e3', '-1', 'x', '99999999999999999999'])(
    'is an error document with 404 for release %s, be it closed or nowhere',
    async (number) => {
      const response = await askCone(number, AROUND)
      expect(response.status).toBe(404)
      expect(await response.text()).toContain(
        '<INFO ID="Error" name="Error" value="There is no release here that is open to you. Check the address."/>',
      )
    },
  )

  it('does not look at who is signed in: a lead finds a private release no more than anybody', async () => {
    viewer = scenario.lead
    expect((await askCone('5', AROUND)).status).toBe(404)
  })

  it('opens with the secret of a link, in whatever place of the query, and with no other', async () => {
    expect((await askCone('3', `key=${token}&${AROUND}`)).status).toBe(200)
    expect((await askCone('3', `key=${token}x&${AROUND}`)).status).toBe(404)
    expect((await askCone('5', `key=${token}&${AROUND}`)).status).toBe(404)
  })

  it('answers what cannot be used with 200 and one Error that says what to do', async () => {
    const response = await askCone('2', 'RA=150&DEC=91&SR=1')
    expect(response.status).toBe(200)
    const text = await response.text()
    expect(text.match(/name="Error"/g)).toHaveLength(1)
    expect(text).toContain('DEC=91 is out of range: it lies between -90 and 90 degrees.')
  })

  it('describes itself, and not what is closed', async () => {
    const about = (number: string, document: string) =>
      ask(describeCone, `/r/north-field/${number}/cone/${document}`, { slug: 'north-field', number, document })
    const text = await (await about('2', 'capabilities')).text()
    expect(text).toContain('<accessURL use="base">http://127.0.0.1:3000/r/north-field/2/cone?</accessURL>')
    expect((await about('2', 'tables')).status).toBe(200)
    expect((await about('newest', 'availability')).status).toBe(200)
    expect((await about('5', 'capabilities')).status).toBe(404)
    expect((await about('2', 'secrets')).status).toBe(422)
  })

  it('lets a browser ask before an unusual request', () => {
    const response = OPTIONS()
    expect(response.status).toBe(204)
    expect(response.headers.get('access-control-allow-methods')).toBe('GET, HEAD, OPTIONS')
  })
})

describe('a stamp of a release', () => {
  it('is kept for ever by everybody where the release is public', async () => {
    const response = await askStamp('1', shaOfFirst, `entry=${encodeURIComponent(FIRST)}`)
    expect(response.status).toBe(200)
    expect(response.headers.get('content-type')).toBe('image/png')
    expect(response.headers.get('cache-control')).toBe('public, max-age=31536000, immutable')
    expect(await response.text()).toBe('PNG of first')
  })

  it('is kept by its reader alone where the release is open by link', async () => {
    const response = await askStamp('3', shaOfFirst, `entry=${encodeURIComponent(FIRST)}&key=${token}`)
    expect(response.status).toBe(200)
    expect(response.headers.get('cache-control')).toBe('private, max-age=3600')
    expect(response.headers.get('access-control-allow-origin')).toBeNull()
  })

  it('is found under its own entry only, whoever knows its hash', async () => {
    expect((await askStamp('2', shaOfFirst, `entry=${encodeURIComponent(SECOND)}`)).status).toBe(404)
    expect((await askStamp('2', 'f'.repeat(64), `entry=${encodeURIComponent(FIRST)}`)).status).toBe(404)
    expect((await askStamp('5', shaOfFirst, `entry=${encodeURIComponent(FIRST)}`)).status).toBe(404)
    expect((await askStamp('2', '../../etc/passwd', `entry=${encodeURIComponent(FIRST)}`)).status).toBe(422)
    expect((await askStamp('2', shaOfFirst, '')).status).toBe(422)
  })
})

describe('a file of a release', () => {
  it('is asked for anew each time, and any page may read it where it is public', async () => {
    const response = await askFile('2', 'catalogue.csv')
    expect(response.status).toBe(200)
    expect(response.headers.get('cache-control')).toBe('public, no-cache')
    expect(response.headers.get('access-control-allow-origin')).toBe('*')
  })

  it('is saved under the name that SHA256SUMS has for it, and an archive under the name of its release', async () => {
    const saved = async (name: string) => (await askFile('2', name)).headers.get('content-disposition')
    const listed = (await (await askFile('2', 'SHA256SUMS')).text()).trim().split('\n')
    for (const name of listed.map((line) => line.slice(66)))
      expect(await saved(name)).toBe(`attachment; filename="${name}"`)
    expect(await saved('RELEASE.zip')).toBe('attachment; filename="north-field-release-2-RELEASE.zip"')
    expect(await saved('stamps.zip')).toBe('attachment; filename="north-field-release-2-stamps.zip"')
  })

  it('is not open to pages of other sites where a session or a secret opened it', async () => {
    const byLink = await askFile('3', 'catalogue.csv', `key=${token}`)
    expect(byLink.status).toBe(200)
    expect(byLink.headers.get('access-control-allow-origin')).toBeNull()
    viewer = scenario.reader
    const bySession = await askFile('5', 'catalogue.csv')
    expect(bySession.status).toBe(200)
    expect(bySession.headers.get('access-control-allow-origin')).toBeNull()
    expect(bySession.headers.get('cache-control')).toBe('private, no-cache')
  })

  it('is nowhere for everybody else, for graders too', async () => {
    expect((await askFile('3', 'catalogue.csv')).status).toBe(404)
    expect((await askFile('3', 'catalogue.csv', 'key=')).status).toBe(404)
    expect((await askFile('2', 'passwd')).status).toBe(404)
    viewer = scenario.graders[0]
    expect((await askFile('5', 'catalogue.csv')).status).toBe(404)
    viewer = scenario.stranger
    expect((await askFile('5', 'catalogue.csv')).status).toBe(404)
  })
})

describe('an entry as JSON', () => {
  it('has the columns of the catalogue, the cautions and the notices', async () => {
    const response = await askEntry('1', FIRST)
    expect(response.headers.get('access-control-allow-origin')).toBe('*')
    expect(await response.json()).toMatchObject({
      cautions: [expect.stringContaining('not spectroscopic confirmations'), expect.stringContaining('SWS')],
      release: { number: 1, notices: [{ kind: 'retraction', number: 4, statement: 'Wrong <pixels>.' }] },
      entry: { entry: FIRST, ra: 150.1, dec: 2.2, votes_a: 4, grade_class: 'A' },
      stamps: [{ view: 'colour', sha256: shaOfFirst }],
    })
  })

  it('carries the secret of a link in its addresses, and is nowhere without it', async () => {
    const { address } = await (await askEntry('3', FIRST, `key=${token}`)).json()
    expect(address).toContain(`?key=${token}`)
    expect((await askEntry('3', FIRST)).status).toBe(404)
    expect((await askEntry('2', 'SWS-J0')).status).toBe(404)
    expect((await askEntry('newest', FIRST)).status).toBe(404)
  })
})
