'use client'

import { useState, type ReactNode } from 'react'
import type { FilePage } from '@/lib/work/intake/delivered-file'
import { ToolButton } from '@/components/table/tool-button'
import { FateFilter } from './fate-filter'
import { FileTable } from './file-table'
import type { FileFilter } from './use-files'

/** The table of files with what narrows it and its pages. */
export function FileList({
  page,
  loading,
  filter,
  onFilter,
  campaignPath,
  children,
}: {
  page: FilePage
  loading: boolean
  filter: FileFilter
  onFilter: (filter: FileFilter) => void
  campaignPath: string
  children?: ReactNode
}) {
  // Cursors of the pages before this one: a list that grows while it is looked at has no page numbers.
  const [before, setBefore] = useState<(string | null)[]>([])

  function narrow(change: Partial<FileFilter>) {
    setBefore([])
    onFilter({ ...filter, ...change, cursor: null })
  }

  return (
    <section aria-label="Files" className="flex flex-col gap-3">
      <div className="flex flex-wrap items-center gap-3">
        <FateFilter summary={page.summary} chosen={filter.fate} onChoose={(fate) => narrow({ fate })} />
        <input
          type="search"
          aria-label="Search file names"
          placeholder="Search names"
          value={filter.search}
          maxLength={255}
          onChange={(event) => narrow({ search: event.target.value })}
          className="min-h-8 w-44 pointer-coarse:min-h-11 pointer-coarse:w-full rounded-control border border-edge bg-well px-2.5 text-small placeholder:text-mute"
        />
        <div className="flex gap-3 md:ml-auto">{children}</div>
      </div>
      {page.files.length > 0 ? (
        <FileTable files={page.files} campaignPath={campaignPath} />
      ) : (
        <p className="py-6 text-mute">{loading ? 'Loading…' : 'No file is like that.'}</p>
      )}
      {before.length > 0 || page.nextCursor ? (
        <div className="flex items-center gap-3">
          <ToolButton
            disabled={before.length === 0}
            onClick={() => {
              onFilter({ ...filter, cursor: before.at(-1) ?? null })
              setBefore(before.slice(0, -1))
            }}
          >
            Earlier files
          </ToolButton>
          <ToolButton
            disabled={page.nextCursor === null}
            onClick={() => {
              setBefore([...before, filter.cursor])
              onFilter({ ...filter, cursor: page.nextCursor })
            }}
          >
            More files
          </ToolButton>
          <span className="text-note text-mute">Page {before.length + 1}</span>
        </div>
      ) : null}
    </section>
  )
}
