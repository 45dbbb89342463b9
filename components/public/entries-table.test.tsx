import { render, screen } from '@testing-library/react'
import { expect, it } from 'vitest'
import type { EntryRow } from '@/lib/work/releases/read-entry'
import { readTableQuery } from '@/lib/work/releases/table-query'
import { EntriesTable } from './entries-table'
import { releaseLinks } from './release-links'

const row = (key: string, radius: number | null, error: number | null): EntryRow => ({
  key,
  designation: `SWS ${key}`,
  name: key,
  raDeg: 10,
  decDeg: 20,
  class: 'A',
  mean: 2.5,
  spread: 0.1,
  probability: null,
  votes: { A: 3, B: 1, C: 0, N: 0, U: 0 },
  knownAs: [],
  einsteinRadiusArcsec: radius,
  einsteinRadiusErrorArcsec: error,
  thumbnail: null,
})

it('gives each Einstein radius with its error, where one is known', () => {
  const rows = [row('J1', 2.2, 0.14), row('J2', 1.5, null), row('J3', null, null)]
  render(
    <EntriesTable
      table={{ rows, count: 3, pages: 1, page: 1, problems: [], sortable: true }}
      query={readTableQuery({})}
      links={releaseLinks('north', 1, null)}
      byReliability={false}
    />,
  )
  expect(screen.getByText('2.20 ± 0.14″')).toBeInTheDocument()
  expect(screen.getByText('1.50″')).toBeInTheDocument()
})
