'use client'

import { useEffect, useState } from 'react'
import useSWR from 'swr'
import type { FileFate } from '@/db/schema/intake'
import type { FilePage } from '@/lib/work/intake/delivered-file'
import { FILES_PER_PAGE } from './files-per-page'

const POLL_MS = 1000

export interface FileFilter {
  fate: FileFate | null
  search: string
  /** null is the first page. */
  cursor: string | null
}

export const FIRST_PAGE: FileFilter = { fate: null, search: '', cursor: null }

function filesKey(slug: string, { fate, search, cursor }: FileFilter): string {
  const query = new URLSearchParams({ limit: String(FILES_PER_PAGE), first: 'refused' })
  if (fate) query.set('fate', fate)
  if (search) query.set('search', search)
  if (cursor) query.set('cursor', cursor)
  return `/api/campaigns/${slug}/files?${query}`
}

async function fetchPage(key: string): Promise<FilePage> {
  const response = await fetch(key)
  const body: unknown = await response.json().catch(() => null)
  if (response.ok) return body as FilePage
  const detail = (body as { detail?: unknown } | null)?.detail
  throw new Error(typeof detail === 'string' ? detail : `The server answered ${response.status}.`)
}

/** A page of files, asked for every second while files are sent or read, and once more when that is over. */
export function useFiles(
  slug: string,
  filter: FileFilter,
  initial: { filter: FileFilter; page: FilePage },
  sending: boolean,
) {
  const isFirst = filesKey(slug, filter) === filesKey(slug, initial.filter)
  const [working, setWorking] = useState(initial.page.summary.working)
  const answer = useSWR<FilePage, Error>(filesKey(slug, filter), fetchPage, {
    fallbackData: isFirst ? initial.page : undefined,
    keepPreviousData: true,
    // A number and not a function of the data: SWR starts its clock anew with each new function, and a page that is drawn
    // ten times a second while files are sent would never ask.
    refreshInterval: sending || working ? POLL_MS : 0,
    onSuccess: (page) => setWorking(page.summary.working),
  })
  const { mutate } = answer
  useEffect(() => {
    if (!sending) void mutate()
  }, [sending, mutate])
  return answer
}
