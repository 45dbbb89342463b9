'use client'

import { counted } from '@/components/campaigns/in-words'
import { ToolButton } from '@/components/table/tool-button'
import type { IntakeSummary } from '@/lib/work/intake/delivered-file'

export type ControlBatch = (batchId: number, reading: 'pause' | 'go on' | 'cancel') => void

/** The batches that the server has still to read, each with its brake. */
export function BatchControls({ batches, onControl }: { batches: IntakeSummary['batches']; onControl: ControlBatch }) {
  if (batches.length === 0) return null
  return (
    <ul aria-label="Batches being read" className="flex flex-col gap-2">
      {batches.map(({ id, name, state, waiting }) => (
        <li key={id} className="flex flex-wrap items-center gap-x-3 gap-y-1.5 text-small">
          <span className="min-w-0">
            {name}: {counted(waiting, 'file')} {waiting === 1 ? 'waits' : 'wait'}
            {state === 'paused' ? ', paused' : ''}
          </span>
          <ToolButton onClick={() => onControl(id, state === 'paused' ? 'go on' : 'pause')}>
            {state === 'paused' ? 'Go on reading' : 'Pause reading'}
          </ToolButton>
          <ToolButton onClick={() => onControl(id, 'cancel')} disabled={waiting === 0}>
            Cancel reading
          </ToolButton>
        </li>
      ))}
    </ul>
  )
}
