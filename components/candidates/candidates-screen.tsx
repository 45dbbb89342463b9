'use client'

import { useMemo } from 'react'
import { DataTable } from '@/components/table/data-table'
import type { ViewsOfTable } from '@/components/table/saved-views'
import { positionOf } from '@/components/table/shared-columns'
import { ButtonLink } from '@/components/ui/button'
import { EmptyState, VisualGradeCaution } from '@/components/ui/notice'
import type { CandidateTable } from '@/lib/work/catalogue/candidate-table'
import { CANDIDATE_COLUMNS, CANDIDATE_SORT, COLUMNS_BY_RELIABILITY, type ColumnsFor } from './candidate-columns'

interface CandidatesScreenProps {
  slug: string
  role: ColumnsFor
  table: CandidateTable
  views?: ViewsOfTable
}

/** Every candidate of the campaign, sorted, narrowed and paged by the server. */
export function CandidatesScreen({ slug, role, table, views }: CandidatesScreenProps) {
  const { rows, count, all } = table
  const linked = useMemo(
    () => rows.map((row) => ({ ...row, href: `/campaigns/${slug}/candidates/${row.id}` })),
    [rows, slug],
  )
  if (all === 0) {
    return (
      <div className="flex flex-col gap-4 px-4 py-6 md:px-6">
        <h1 className="text-title font-semibold">Candidates</h1>
        <EmptyState title="No candidates yet">
          {role === 'lead' ? (
            <>
              <p>Candidates come with their cutouts: drop the FITS files of the campaign on the intake page.</p>
              <ButtonLink tone="lamp" href={`/campaigns/${slug}/intake`}>
                Bring in cutouts
              </ButtonLink>
            </>
          ) : (
            <p>A lead of this campaign has still to bring in the cutouts. They appear here as soon as they are read.</p>
          )}
        </EmptyState>
      </div>
    )
  }
  return (
    <div className="flex flex-col gap-3 px-4 py-4 md:h-dvh md:px-6 md:py-5">
      <header>
        <h1 className="text-title font-semibold">
          {all.toLocaleString('en')} {all === 1 ? 'candidate' : 'candidates'}
        </h1>
        {role === 'grader' ? (
          <p className="text-note text-mute">
            State and grades of a candidate are shown once you have graded it yourself, so that nobody’s judgement sways
            yours.
          </p>
        ) : null}
        <VisualGradeCaution />
      </header>
      <div className="flex flex-col md:min-h-0 md:flex-1">
        <DataTable
          label="Candidates"
          noun="candidates"
          columns={(table.byReliability ? COLUMNS_BY_RELIABILITY : CANDIDATE_COLUMNS)[role]}
          rows={linked}
          rowId={(row) => String(row.id)}
          defaultSort={CANDIDATE_SORT}
          count={count}
          all={all}
          position={positionOf}
          views={views}
        />
      </div>
    </div>
  )
}
