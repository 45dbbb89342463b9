'use client'

import { useState } from 'react'
import { counted } from '@/components/campaigns/in-words'
import { PageHead } from '@/components/campaigns/page-head'
import { Button, ButtonLink } from '@/components/ui/button'
import { Notice } from '@/components/ui/notice'
import type { FilePage, IntakeSummary } from '@/lib/work/intake/delivered-file'
import { DropZone } from './drop-zone'
import { FileList } from './file-list'
import { HowMatched, type MatchingRules } from './how-matched'
import { UploadProgress } from './upload-progress'
import { FIRST_PAGE, useFiles, type FileFilter } from './use-files'
import { useUploads } from './use-uploads'
import { WorkProgress } from './work-progress'

function headline({ files, candidatesImaged, candidates, refused }: IntakeSummary): string {
  if (files === 0) return 'No files yet'
  const made = candidates > 0 ? `, ${counted(candidatesImaged, 'candidate')} imaged` : ''
  const bad = refused > 0 ? `, ${refused.toLocaleString('en')} refused` : ''
  return `${counted(files, 'file')}${made}${bad}`
}

export function IntakeScreen({ slug, initial, rules }: { slug: string; initial: FilePage; rules: MatchingRules }) {
  const campaignPath = `/campaigns/${slug}`
  const { queue, state } = useUploads(slug)
  const [left, setLeft] = useState<string[]>([])
  const [filter, setFilter] = useState<FileFilter>(FIRST_PAGE)
  const [fault, setFault] = useState<string | null>(null)
  const { data, error, isLoading, mutate } = useFiles(slug, filter, initial, state.active)
  const page = data ?? initial
  const { summary } = page

  async function tryAgain() {
    setFault(null)
    const body = JSON.stringify({ retry: 'refused' })
    const headers = { 'content-type': 'application/json' }
    const response = await fetch(`/api/campaigns/${slug}/files`, { method: 'POST', body, headers }).catch(() => null)
    if (!response?.ok) setFault('That did not reach the server. Nothing was changed; try again.')
    await mutate()
  }

  return (
    <div className="mx-auto flex max-w-7xl flex-col gap-7 px-5 py-8 md:px-10">
      <PageHead title={headline(summary)} lead="From FITS files and manifests to candidates with pictures.">
        {summary.candidatesImaged > 0 ? (
          <ButtonLink href={`${campaignPath}/candidates`}>See the candidates</ButtonLink>
        ) : null}
      </PageHead>
      <div className="grid items-start gap-6 lg:grid-cols-[minmax(0,1fr)_minmax(0,1fr)]">
        <div className="flex flex-col gap-5">
          <DropZone
            onChosen={(chosen) => {
              setLeft(chosen.left)
              queue.add(chosen.files)
            }}
          />
          <UploadProgress state={state} left={left} onRetry={() => queue.retryFailed()} />
          <WorkProgress summary={summary} />
        </div>
        <details open={summary.files === 0} className="rounded-tray border border-line px-5 py-4">
          <summary className="text-body font-semibold">How files are matched</summary>
          <div className="mt-3">
            <HowMatched rules={rules} settingsPath={`${campaignPath}/settings`} />
          </div>
        </details>
      </div>
      {error ? (
        <Notice tone="alarm">
          The list of files could not be brought up to date: {error.message} It shows what was last known.
        </Notice>
      ) : null}
      {fault ? <Notice tone="alarm">{fault}</Notice> : null}
      {summary.files > 0 ? (
        <FileList page={page} loading={isLoading} filter={filter} onFilter={setFilter} campaignPath={campaignPath}>
          {summary.refused > 0 ? <Button onClick={() => void tryAgain()}>Try refused files again</Button> : null}
        </FileList>
      ) : null}
    </div>
  )
}
