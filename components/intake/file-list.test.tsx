import { render, screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { describe, expect, it, vi } from 'vitest'
import type { DeliveredFile, FilePage } from '@/lib/work/intake/delivered-file'
import { FileList } from './file-list'
import { FIRST_PAGE } from './use-files'

const file = (id: number, change: Partial<DeliveredFile>): DeliveredFile => ({
  id,
  name: `SWS${id}_g.fits`,
  kind: 'fits',
  sha256: 'a'.repeat(64),
  bytes: 28800,
  fate: 'imaged',
  fault: null,
  reason: null,
  candidate: `SWS${id}`,
  candidateId: id,
  bands: ['g'],
  batch: 'Night 1',
  replaced: false,
  createdAt: '2026-01-01T00:00:00.000Z',
  updatedAt: '2026-01-01T00:00:00.000Z',
  ...change,
})

const page = (files: DeliveredFile[], nextCursor: string | null = null): FilePage => ({
  files,
  nextCursor,
  summary: {
    files: 1204,
    stored: 0,
    read: 0,
    imaged: 1203,
    duplicate: 0,
    refused: 1,
    candidates: 402,
    candidatesImaged: 402,
    working: false,
    progress: null,
    fault: null,
    batches: [],
  },
})

function show(shown: FilePage) {
  const onFilter = vi.fn()
  render(
    <FileList page={shown} loading={false} filter={FIRST_PAGE} onFilter={onFilter} campaignPath="/campaigns/north" />,
  )
  return onFilter
}

describe('the table of files', () => {
  it('says each file\u2019s fate as a word and why it is refused in words', () => {
    show(
      page([file(1, { fate: 'refused', fault: 'truncated-data', reason: 'The file is cut off.', candidateId: null })]),
    )
    const row = screen.getByRole('row', { name: /SWS1_g.fits/ })
    expect(within(row).getByText('refused')).toBeInTheDocument()
    expect(within(row).getByRole('cell', { name: 'The file is cut off.' })).toBeInTheDocument()
    expect(within(row).getByText('28.1 KiB')).toBeInTheDocument()
  })

  it('leads to the candidate that has the file\u2019s pixels, and to none that the name only promises', () => {
    show(page([file(1, {}), file(2, { fate: 'refused', candidateId: null })]))
    expect(screen.getByRole('link', { name: 'SWS1' })).toHaveAttribute('href', '/campaigns/north/candidates/1')
    expect(screen.queryByRole('link', { name: 'SWS2' })).toBeNull()
  })

  it('shows one fate on demand, with the count of each', async () => {
    const onFilter = show(page([file(1, {})]))
    await userEvent.click(screen.getByRole('button', { name: 'refused 1' }))
    expect(onFilter).toHaveBeenCalledWith({ fate: 'refused', search: '', cursor: null })
    expect(screen.getByRole('button', { name: 'all 1,204' })).toHaveAttribute('aria-pressed', 'true')
  })

  it('goes on to more files and back', async () => {
    const onFilter = show(page([file(1, {})], 'others-100'))
    expect(screen.getByRole('button', { name: 'Earlier files' })).toBeDisabled()
    await userEvent.click(screen.getByRole('button', { name: 'More files' }))
    expect(onFilter).toHaveBeenLastCalledWith({ fate: null, search: '', cursor: 'others-100' })
    await userEvent.click(screen.getByRole('button', { name: 'Earlier files' }))
    expect(onFilter).toHaveBeenLastCalledWith({ fate: null, search: '', cursor: null })
  })

  it('says so when no file is like what is asked for', () => {
    show(page([]))
    expect(screen.getByText('No file is like that.')).toBeInTheDocument()
  })
})
