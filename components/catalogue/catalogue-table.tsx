'use client'

import { useMemo } from 'react'
import { DataTable } from '@/components/table/data-table'
import type { CatalogueTableRow } from '@/lib/work/catalogue/catalogue-table'
import { CATALOGUE_COLUMNS, CATALOGUE_SORT, COLUMNS_BY_RELIABILITY } from './catalogue-columns'

/** The whole catalogue, sorted and narrowed in the browser. */
export function CatalogueTable({ slug, rows }: { slug: string; rows: readonly CatalogueTableRow[] }) {
  const linked = useMemo(
    () => rows.map((row) => ({ ...row, href: `/campaigns/${slug}/candidates/${row.id}` })),
    [rows, slug],
  )
  return (
    <DataTable
      label="Confirmed candidates"
      noun="entries"
      columns={rows.some(({ probability }) => probability !== null) ? COLUMNS_BY_RELIABILITY : CATALOGUE_COLUMNS}
      rows={linked}
      rowId={(row) => String(row.id)}
      defaultSort={CATALOGUE_SORT}
    />
  )
}
