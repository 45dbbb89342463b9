'use client'

import { Button } from '@/components/ui/button'
import { Notice } from '@/components/ui/notice'
import { counted } from '@/components/campaigns/in-words'
import { ToolButton } from '@/components/table/tool-button'
import { fileSize } from './file-size'
import { ProgressBar } from '@/components/ui/progress-bar'
import type { UploadQueue, UploadState } from './upload-queue'

const FAILED_SHOWN = 20

function sentence({ done, total, failed, duplicates, active, paused, stalled, cancelled }: UploadState): string {
  if (active) {
    const counts = `${done.toLocaleString('en')} of ${counted(total, 'file')} are on the server`
    if (paused) return `Sending is paused: ${counts}.`
    if (stalled) return `The connection is lost: ${counts}. It goes on by itself when the server can be reached.`
    return `Sending: ${counts}.`
  }
  const twice = duplicates > 0 ? `, ${duplicates.toLocaleString('en')} of them here before` : ''
  const lost = failed.length > 0 ? `; ${failed.length.toLocaleString('en')} did not arrive` : ''
  const left = cancelled > 0 ? `; ${cancelled.toLocaleString('en')} not sent because sending was cancelled` : ''
  return `${counted(done, 'file')} sent${twice}${lost}${left}.`
}

/** What this browser is sending; what the server does with it stands below. */
export function UploadProgress({
  state,
  left,
  queue,
}: {
  state: UploadState
  left: string[]
  queue: Pick<UploadQueue, 'retryFailed' | 'pause' | 'goOn' | 'cancel'>
}) {
  if (state.total === 0 && left.length === 0) return null
  return (
    <section aria-label="Files being sent" className="flex flex-col gap-3">
      {state.total > 0 ? (
        <>
          <div className="flex flex-wrap items-baseline justify-between gap-x-6">
            <p role="status" className="text-body">
              {sentence(state)}
            </p>
            <p className="figures text-note text-mute">
              {fileSize(state.bytesSent)} of {fileSize(state.bytes)}
            </p>
          </div>
          {state.active ? (
            <>
              <ProgressBar label="Files sent" done={state.bytesSent} total={state.bytes} />
              <div className="flex flex-wrap items-center gap-3">
                <ToolButton onClick={() => (state.paused ? queue.goOn() : queue.pause())}>
                  {state.paused ? 'Go on sending' : 'Pause sending'}
                </ToolButton>
                <ToolButton onClick={() => queue.cancel()}>Cancel sending</ToolButton>
                <span className="text-note text-mute">
                  Closed by accident? Choose the same folder again: only what is missing is sent.
                </span>
              </div>
            </>
          ) : null}
        </>
      ) : null}
      {state.sending.length > 0 ? (
        <ul className="grid gap-x-6 gap-y-1 md:grid-cols-2">
          {state.sending.map(({ id, name, sent, bytes }) => (
            <li key={id} className="flex items-center gap-3 text-note text-mute">
              <span className="figures min-w-0 flex-1 truncate" title={name}>
                {name}
              </span>
              <span className="w-24 shrink-0">
                <ProgressBar label={name} done={sent} total={bytes} />
              </span>
            </li>
          ))}
        </ul>
      ) : null}
      {left.length > 0 ? (
        <p className="text-note text-mute">
          Left out as hidden or unreadable: <span className="figures">{left.slice(0, 5).join(', ')}</span>
          {left.length > 5 ? ` and ${left.length - 5} more` : ''}.
        </p>
      ) : null}
      {state.failed.length > 0 ? (
        <Notice tone="alarm">
          <div className="flex flex-col items-start gap-3">
            <p>{counted(state.failed.length, 'file')} did not arrive. Nothing of them was kept; the others are safe.</p>
            <ul className="flex flex-col gap-1">
              {state.failed.slice(0, FAILED_SHOWN).map(({ id, name, fault }) => (
                <li key={id}>
                  <span className="figures">{name}</span>: {fault}
                </li>
              ))}
              {state.failed.length > FAILED_SHOWN ? <li>and {state.failed.length - FAILED_SHOWN} more</li> : null}
            </ul>
            <Button onClick={() => queue.retryFailed()}>Send them again</Button>
          </div>
        </Notice>
      ) : null}
    </section>
  )
}
