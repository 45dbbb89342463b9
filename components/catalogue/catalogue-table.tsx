'use client'

import { useMemo } from 'react'
import { DataTable } from '@/components/table/data-table'
import type { ViewsOfTable } from '@/components/table/saved-views'
import { positionOf } from '@/components/table/shared-columns'
import type { CatalogueTable as Catalogue } from '@/lib/work/catalogue/catalogue-table'
import { CATALOGUE_COLUMNS, CATALOGUE_SORT, COLUMNS_BY_RELIABILITY } from './catalogue-columns'

interface CatalogueTableProps {
  slug: string
  catalogue: Pick<Catalogue, 'rows' | 'count' | 'all' | 'byReliability'>
  views?: ViewsOfTable
}

/** A page of the catalogue, sorted and narrowed by the server. */
export function CatalogueTable({ slug, catalogue, views }: CatalogueTableProps) {
  const { rows, count, all, byReliability } = catalogue
  const linked = useMemo(
    () => rows.map((row) => ({ ...row, href: `/campaigns/${slug}/candidates/${row.id}` })),
    [rows, slug],
  )
  return (
    <DataTable
      label="Confirmed candidates"
      noun="entries"
      columns={byReliability ? COLUMNS_BY_RELIABILITY : CATALOGUE_COLUMNS}
      rows={linked}
      count={count}
      all={all}
      rowId={(row) => String(row.id)}
      defaultSort={CATALOGUE_SORT}
      position={positionOf}
      views={views}
    />
  )
}
