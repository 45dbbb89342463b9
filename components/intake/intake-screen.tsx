'use client'

import { useCallback, useState } from 'react'
import { Download } from 'lucide-react'
import { counted } from '@/components/campaigns/in-words'
import { PageHead } from '@/components/campaigns/page-head'
import { Button, ButtonLink } from '@/components/ui/button'
import { Notice } from '@/components/ui/notice'
import type { FilePage, IntakeSummary } from '@/lib/work/intake/delivered-file'
import { BatchControls, type ControlBatch } from './batch-controls'
import type { Chosen, ChosenFile } from './collect-files'
import { DropZone } from './drop-zone'
import { FileList } from './file-list'
import { HowMatched, type MatchingRules } from './how-matched'
import { lookUp } from './look-up'
import { knownHash, MatchStep, type SavePattern } from './match-step'
import { postJson } from './post-json'
import { useSendAtOnce } from './send-at-once'
import { UploadProgress } from './upload-progress'
import { useFiles, type FileFilter } from './use-files'
import { useUploads } from './use-uploads'
import { WorkProgress } from './work-progress'

function headline({ files, candidatesImaged, candidates, refused }: IntakeSummary): string {
  if (files === 0) return 'No files yet'
  const made = candidates > 0 ? `, ${counted(candidatesImaged, 'candidate')} imaged` : ''
  const bad = refused > 0 ? `, ${refused.toLocaleString('en')} refused` : ''
  return `${counted(files, 'file')}${made}${bad}`
}

/** What narrows the table stands in the address, so that it survives a reload and can be sent to somebody. */
function rememberFilter({ fate, search }: FileFilter): void {
  const query = new URLSearchParams([...(fate ? [['fate', fate]] : []), ...(search ? [['search', search]] : [])])
  const text = query.toString()
  window.history.replaceState(null, '', `${window.location.pathname}${text ? `?${text}` : ''}`)
}

export function IntakeScreen({
  slug,
  initial,
  initialFilter,
  rules,
  savePattern,
}: {
  slug: string
  initial: FilePage
  initialFilter: FileFilter
  rules: MatchingRules
  savePattern: SavePattern
}) {
  const campaignPath = `/campaigns/${slug}`
  const { queue, state } = useUploads(slug)
  const [left, setLeft] = useState<string[]>([])
  const [inHand, setInHand] = useState<ChosenFile[] | null>(null)
  const [hasLooked, setHasLooked] = useState(false)
  const [atOnce, setAtOnce] = useSendAtOnce()
  const [filter, setFilter] = useState<FileFilter>(initialFilter)
  const [fault, setFault] = useState<string | null>(null)
  const { data, error, isLoading, mutate } = useFiles(
    slug,
    filter,
    { filter: initialFilter, page: initial },
    state.active,
  )
  const ask = useCallback((names: string[]) => lookUp(slug, names), [slug])
  const page = data ?? initial
  const { summary } = page

  async function choose(chosen: Chosen) {
    setLeft(chosen.left)
    if (chosen.files.length === 0) return
    if (!atOnce) {
      setHasLooked(true)
      return setInHand(chosen.files)
    }
    // Not knowing what is here costs only time: the same bytes sent again change nothing.
    const here = await ask(chosen.files.map(({ name }) => name)).catch(() => null)
    queue.add(chosen.files.map((file, index) => ({ ...file, known: knownHash(here, index, file) })))
  }

  async function post(address: string, body: object) {
    setFault(await postJson(`/api/campaigns/${slug}/${address}`, body))
    await mutate()
  }
  const control: ControlBatch = (batchId, reading) => void post(`batches/${batchId}`, { reading })

  return (
    <div className="mx-auto flex max-w-7xl flex-col gap-7 px-5 py-8 md:px-10">
      <PageHead title={headline(summary)} lead="From FITS files and manifests to candidates with pictures.">
        {summary.candidatesImaged > 0 ? (
          <ButtonLink href={`${campaignPath}/candidates`}>See the candidates</ButtonLink>
        ) : null}
      </PageHead>
      {inHand ? (
        <MatchStep
          files={inHand}
          rules={rules}
          ask={ask}
          savePattern={savePattern}
          onTake={(files) => {
            setInHand(null)
            queue.add(files)
          }}
          onDrop={() => setInHand(null)}
        />
      ) : null}
      <div className={`grid items-start gap-6 ${inHand ? '' : 'lg:grid-cols-[minmax(0,1fr)_minmax(0,1fr)]'}`}>
        <div className="flex flex-col gap-5">
          {inHand ? null : (
            <div className="flex flex-col gap-3">
              <DropZone isBack={hasLooked} onChosen={(chosen) => void choose(chosen)} />
              <label className="flex items-center gap-2 text-small text-mute pointer-coarse:min-h-11">
                <input
                  type="checkbox"
                  checked={atOnce}
                  onChange={(event) => setAtOnce(event.target.checked)}
                  className="size-4 accent-text pointer-coarse:size-5"
                />
                Send at once, without looking at the matches first
              </label>
            </div>
          )}
          <UploadProgress state={state} left={left} queue={queue} />
          <WorkProgress summary={summary} />
          <BatchControls batches={summary.batches} onControl={control} />
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
        <FileList
          page={page}
          loading={isLoading}
          filter={filter}
          onFilter={(next) => {
            setFilter(next)
            rememberFilter(next)
          }}
          campaignPath={campaignPath}
        >
          <a
            href={`/api/campaigns/${slug}/files/problems.csv`}
            download
            className="inline-flex min-h-8 items-center gap-1.5 rounded-control border pointer-coarse:min-h-11 border-edge/40 px-2.5 text-small text-mute hover:border-edge hover:text-text"
          >
            <Download size={15} aria-hidden="true" />
            Problems as CSV
          </a>
          {summary.refused > 0 ? (
            <Button onClick={() => void post('files', { retry: 'refused' })}>Try refused files again</Button>
          ) : null}
        </FileList>
      ) : null}
    </div>
  )
}
