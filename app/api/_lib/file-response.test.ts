import { expect, it } from 'vitest'
import { fileResponse } from './file-response'

/** Pieces without end, and a note of whether whoever made them was told to stop. */
function endless() {
  const seen = { pieces: 0, ended: false }
  async function* text() {
    try {
      for (;;) yield `piece ${(seen.pieces += 1)}\n`
    } finally {
      seen.ended = true
    }
  }
  return { seen, file: { fileName: 'a.csv', contentType: 'text/csv; charset=utf-8; header=present', text: text() } }
}

async function* pieces(...texts: string[]) {
  yield* texts
}

it('sends the text as a file that a browser saves and does not guess about', async () => {
  const response = await fileResponse({
    fileName: 'north.vot',
    contentType: 'application/x-votable+xml',
    text: pieces('a', 'θ'),
  })
  expect(response.headers.get('content-type')).toBe('application/x-votable+xml')
  expect(response.headers.get('content-disposition')).toBe('attachment; filename="north.vot"')
  expect(response.headers.get('x-content-type-options')).toBe('nosniff')
  expect(response.headers.get('cache-control')).toBe('private, no-store')
  expect(await response.text()).toBe('aθ')
})

it('ends the text when the client goes away, and makes no more than it was asked for', async () => {
  const { seen, file } = endless()
  const reader = (await fileResponse(file)).body!.getReader()
  await reader.read()
  await reader.cancel()
  expect(seen.ended).toBe(true)
  expect(seen.pieces).toBeLessThan(5)
})

it('refuses before anything is sent when the first piece fails', async () => {
  async function* failing(): AsyncGenerator<string, void, void> {
    yield await Promise.reject(new Error('no first row'))
  }
  await expect(fileResponse({ fileName: 'a', contentType: 'text/csv', text: failing() })).rejects.toThrow(
    'no first row',
  )
})

it('breaks off instead of looking complete when a later piece fails', async () => {
  async function* failing(): AsyncGenerator<string, void, void> {
    yield 'header\n'
    throw new Error('row 2')
  }
  const response = await fileResponse({ fileName: 'a', contentType: 'text/csv', text: failing() })
  await expect(response.text()).rejects.toThrow('row 2')
})

it('sends an empty file for a text without pieces', async () => {
  const response = await fileResponse({ fileName: 'a', contentType: 'text/csv', text: pieces() })
  expect(await response.text()).toBe('')
})
