import { mkdtempSync } from 'node:fs'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { NextRequest } from 'next/server'
import { beforeEach, describe, expect, it, vi } from 'vitest'
import type { Viewer } from '@/lib/work/people/viewer'
import { makeScenario, type Scenario } from '@/tests/_support/scenario'

const session = vi.hoisted(() => ({ viewer: null as Viewer | null, db: null as unknown }))
vi.mock('@/lib/work/people/session', () => ({ getViewer: async () => session.viewer }))
vi.mock('@/lib/platform/database', () => ({ database: async () => session.db }))
vi.mock('@/lib/platform/storage/blobs', async () => {
  const { BlobStore } = await import('@/lib/platform/storage/blob-store')
  const folder = mkdtempSync(path.join(tmpdir(), 'ringside-route-'))
  const store = new BlobStore(path.join(folder, 'blobs'), path.join(folder, 'incoming'))
  return { blobs: () => store }
})

const { PUT } = await import('./route')
const { GET, POST } = await import('../route')
const problems = await import('../problems.csv/route')
const batches = await import('../../batches/[id]/route')

let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario()
  session.db = scenario.db
  session.viewer = scenario.lead
})

const slug = 'north-field'

function put(name: string, body: string, headers: Record<string, string> = {}): Promise<Response> {
  const length = { 'content-length': String(body.length) }
  const request = new NextRequest(`http://ringside.test/api/campaigns/${slug}/files/${name}`, {
    method: 'PUT',
    body: body === '' ? null : body,
    headers: { ...length, ...headers },
  })
  return PUT(request, { params: Promise.resolve({ slug, name: [] }) })
}

function list(query = ''): Promise<Response> {
  const request = new NextRequest(`http://ringside.test/api/campaigns/${slug}/files${query}`)
  return GET(request, { params: Promise.resolve({ slug }) })
}

describe('PUT /api/campaigns/{slug}/files/{name}', () => {
  it('answers 201 with the file and its fate so far, and 200 when it is here already', async () => {
    const first = await put('north%20field/SWS1_g.fits', 'abc')
    expect(first.status).toBe(201)
    expect(await first.json()).toEqual({
      id: 1,
      name: 'north field/SWS1_g.fits',
      // FIPS 180-4 test vector: SHA-256 of "abc".
      sha256: 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad',
      bytes: 3,
      fate: 'stored',
      reason: null,
      candidate: 'SWS1',
      band: 'g',
    })
    const again = await put('north%20field/SWS1_g.fits', 'abc')
    expect(again.status).toBe(200)
    expect(await again.json()).toMatchObject({ id: 1, fate: 'duplicate' })
  })

  it('takes an empty file, so that the reader can say that it is empty', async () => {
    expect((await put('SWS1_g.fits', '')).status).toBe(201)
  })

  it.each([
    ['a body shorter than announced', 'SWS1_g.fits', { 'content-length': '4' }, 400],
    ['a body over the limit', 'SWS1_g.fits', { 'content-length': '999999999999' }, 413],
    ['a name that climbs out', '%2e%2e%2fx.fits', {}, 422],
    ['a batch without a name', 'SWS1_g.fits?batch=', {}, 422],
    ['another site', 'SWS1_g.fits', { 'sec-fetch-site': 'cross-site' }, 403],
  ])('refuses %s with a problem document and keeps nothing', async (_, name, headers, status) => {
    const response = await put(name, 'abc', headers)
    expect(response.status).toBe(status)
    expect(response.headers.get('content-type')).toBe('application/problem+json')
    expect(await scenario.db.selectFrom('file').selectAll().execute()).toEqual([])
  })

  it.each([
    ['nobody', () => null, 401],
    ['a grader', () => scenario.graders[0], 403],
    ['a viewer', () => scenario.reader, 403],
    ['a stranger', () => scenario.stranger, 404],
  ])('takes no file from %s', async (_, who, status) => {
    session.viewer = who()
    expect((await put('SWS1_g.fits', 'abc')).status).toBe(status)
    expect(await scenario.db.selectFrom('file').selectAll().execute()).toEqual([])
  })
})

describe('GET /api/campaigns/{slug}/files', () => {
  it('lists files with a summary for a script that waits', async () => {
    await put('SWS1_g.fits', 'abc')
    const answer = await (await list()).json()
    expect(answer.files).toMatchObject([{ name: 'SWS1_g.fits', fate: 'stored' }])
    expect(answer.summary).toMatchObject({ files: 1, stored: 1, working: true })
  })

  it.each([
    ['nobody', () => null, 401],
    ['a grader', () => scenario.graders[0], 403],
    ['a stranger', () => scenario.stranger, 404],
  ])('tells nothing to %s', async (_, who, status) => {
    session.viewer = who()
    expect((await list()).status).toBe(status)
  })

  it('refuses a limit that is no number', async () => {
    expect((await list('?limit=many')).status).toBe(422)
  })
})

describe('POST /api/campaigns/{slug}/files', () => {
  const retry = (body: string) =>
    POST(new NextRequest(`http://ringside.test/api/campaigns/${slug}/files`, { method: 'POST', body }), {
      params: Promise.resolve({ slug }),
    })

  it('has refused files tried again', async () => {
    await put('SWS1_g.fits', 'abc')
    await scenario.db.updateTable('file').set({ fate: 'refused', fault: 'no-band' }).execute()
    expect(await (await retry('{"retry":"refused"}')).json()).toEqual({ files: 1 })
  })

  it.each(['{', '{}', '{"retry":"all"}'])('refuses %s', async (body) => {
    expect([400, 422]).toContain((await retry(body)).status)
  })

  it('is for leads', async () => {
    session.viewer = scenario.graders[0]
    expect((await retry('{"retry":"refused"}')).status).toBe(403)
  })
})

describe('POST /api/campaigns/{slug}/files with names', () => {
  const look = (body: unknown) =>
    POST(
      new NextRequest(`http://ringside.test/api/campaigns/${slug}/files`, {
        method: 'POST',
        body: JSON.stringify(body),
      }),
      { params: Promise.resolve({ slug }) },
    )

  it('answers what is here under them, so that only what is missing is sent', async () => {
    await put('SWS1_g.fits', 'abc')
    const { files } = await (await look({ look: [{ name: 'SWS1_g.fits' }, { name: 'SWS1_r.fits' }] })).json()
    expect(files).toMatchObject([{ bytes: 3, fate: 'stored' }, null])
  })

  it.each([
    ['a grader', () => scenario.graders[0], 403],
    ['a stranger', () => scenario.stranger, 404],
  ])('tells nothing to %s', async (_, who, status) => {
    session.viewer = who()
    expect((await look({ look: [] })).status).toBe(status)
  })
})

describe('GET /api/campaigns/{slug}/files/problems.csv', () => {
  const download = () =>
    problems.GET(new NextRequest(`http://ringside.test/api/campaigns/${slug}/files/problems.csv`), {
      params: Promise.resolve({ slug }),
    })

  it('is a file to save', async () => {
    const response = await download()
    expect(response.headers.get('content-disposition')).toBe('attachment; filename="north-field-problems.csv"')
    expect(await response.text()).toBe('file,kind,batch,fate,fault,line,problem,delivered_at\r\n')
  })

  it('does not stand in the way of a manifest of that name', async () => {
    const response = await problems.PUT(
      new NextRequest(`http://ringside.test/api/campaigns/${slug}/files/problems.csv`, {
        method: 'PUT',
        body: 'abc',
        headers: { 'content-length': '3' },
      }),
      { params: Promise.resolve({ slug }) },
    )
    expect(response.status).toBe(201)
    expect(await response.json()).toMatchObject({ name: 'problems.csv', fate: 'stored' })
  })

  it.each([
    ['a viewer', () => scenario.reader, 403],
    ['a stranger', () => scenario.stranger, 404],
  ])('is not for %s', async (_, who, status) => {
    session.viewer = who()
    expect((await download()).status).toBe(status)
  })
})

describe('POST /api/campaigns/{slug}/batches/{id}', () => {
  const control = (id: string, body: unknown) =>
    batches.POST(
      new NextRequest(`http://ringside.test/api/campaigns/${slug}/batches/${id}`, {
        method: 'POST',
        body: JSON.stringify(body),
      }),
      { params: Promise.resolve({ slug, id }) },
    )

  it('cancels the reading of a batch', async () => {
    await put('SWS1_g.fits', 'abc')
    expect(await (await control('1', { reading: 'cancel' })).json()).toEqual({ cancelled: 1 })
  })

  it.each([
    ['another word', '1', { reading: 'stop' }, () => scenario.lead, 422],
    ['a batch that is not there', '7', { reading: 'pause' }, () => scenario.lead, 404],
    ['a grader', '1', { reading: 'cancel' }, () => scenario.graders[0], 403],
  ])('refuses %s and changes nothing', async (_, id, body, who, status) => {
    await put('SWS1_g.fits', 'abc')
    session.viewer = who()
    expect((await control(id, body)).status).toBe(status)
    expect(await scenario.db.selectFrom('file').select('fate').execute()).toEqual([{ fate: 'stored' }])
    expect(await scenario.db.selectFrom('batch').select('state').execute()).toEqual([{ state: 'open' }])
  })
})

describe('the columns of a manifest', () => {
  it('are kept with it, and another choice has it read again', async () => {
    const columns = (chosen: string) => put(`list.csv?columns=${encodeURIComponent(chosen)}`, 'abc')
    expect((await columns('{"candidate":"myid"}')).status).toBe(201)
    await scenario.db.updateTable('file').set({ fate: 'read' }).execute()
    expect(await (await columns('{"candidate":"myid"}')).json()).toMatchObject({ fate: 'duplicate' })
    expect(await (await columns('{"candidate":"other"}')).json()).toMatchObject({ fate: 'stored' })
    const rows = await scenario.db.selectFrom('file').select(['fate', 'columns']).execute()
    expect(rows).toEqual([{ fate: 'stored', columns: '{"candidate":"other"}' }])
  })

  it.each(['nonsense', '[]', '{"colour":"red"}'])('are refused as %s', async (chosen) => {
    expect((await put(`list.csv?columns=${encodeURIComponent(chosen)}`, 'abc')).status).toBe(422)
  })
})
