'use client'

import { useState } from 'react'
import { moment } from '@/components/campaigns/in-words'
import { Notice } from '@/components/ui/notice'
import { TextButton } from '@/components/ui/text-button'
import type { CandidateMeasurements, CombinedShown, MeasurementShown } from '@/lib/work/measuring/measurement-shown'
import { powerOfTen, threeDigits, withError } from './in-figures'
import { KIND_WORDS } from './kept-words'
import { Remarks } from './mass-table'
import type { SaveAnswer } from './save-measurement'

export type WithdrawAction = (measurementId: number) => Promise<SaveAnswer>

export interface MeasurementListProps {
  measurements: CandidateMeasurements
  shownIds: readonly number[]
  onShow: (id: number) => void
  onOpen: (kept: MeasurementShown) => void
  onWithdraw: WithdrawAction | null
}

/** What people have measured, combined and each by itself. */
export function MeasurementList(props: MeasurementListProps) {
  const { standing, earlier, combined, alone } = props.measurements
  return (
    <div className="flex flex-col gap-3">
      {standing.length === 0 ? <p className="text-small text-mute">Nobody’s measurement stands here yet.</p> : null}
      {combined ? <Combined combined={combined} /> : null}
      <ul className="grid gap-x-6 gap-y-3 sm:grid-cols-2">
        {standing.map((kept) => (
          <Kept key={kept.id} kept={kept} apart={combined?.apartIds.includes(kept.id) ?? false} {...props} />
        ))}
      </ul>
      {alone ? (
        <p className="text-note text-mute">
          Others’ measurements are shown once the candidate is decided, so that each is made independently.
        </p>
      ) : null}
      {earlier.length > 0 ? (
        <details>
          <summary className="min-h-6 text-note text-mute">{earlier.length} replaced or withdrawn, kept</summary>
          <ul className="flex flex-col gap-2 pt-2">
            {earlier.map((kept) => (
              <li key={kept.id} className="figures text-note text-mute">
                {withError(kept.einsteinRadiusArcsec, kept.errorArcsec, '″')}, {KIND_WORDS[kept.kind]} by{' '}
                {kept.own ? 'you' : kept.by}, {moment(kept.at)}, {kept.endedBy?.withdrawn ? 'withdrawn' : 'replaced'}
              </li>
            ))}
          </ul>
        </details>
      ) : null}
    </div>
  )
}

function Combined({ combined }: { combined: CombinedShown }) {
  const { count, radiusArcsec, errorArcsec, scatterArcsec, smallestArcsec, largestArcsec } = combined
  // Which lie apart is said at each of them.
  const notes = combined.notes.filter((note) => !note.startsWith('Measurement '))
  return (
    <div className="flex flex-col gap-1">
      <p className="flex flex-wrap items-baseline gap-x-2">
        <span className="text-note text-mute">Einstein radius</span>
        <span className="figures text-title font-semibold">{withError(radiusArcsec, errorArcsec, '″')}</span>
      </p>
      {count > 1 && scatterArcsec !== null ? (
        <p className="figures text-note text-mute">
          {count} people, scatter {scatterArcsec.toFixed(2)}″, from {smallestArcsec.toFixed(2)}″ to{' '}
          {largestArcsec.toFixed(2)}″
        </p>
      ) : null}
      <Remarks lines={notes} />
    </div>
  )
}

function Kept({
  kept,
  apart,
  shownIds,
  onShow,
  onOpen,
  onWithdraw,
}: MeasurementListProps & { kept: MeasurementShown; apart: boolean }) {
  const [answer, setAnswer] = useState<SaveAnswer>({})
  const [busy, setBusy] = useState(false)
  const { mass } = kept
  const tall = 'pointer-coarse:min-h-11'
  return (
    <li className="flex flex-col gap-0.5 border-l-2 border-line pl-3">
      <p className="flex flex-wrap items-baseline gap-x-3">
        <span className="figures font-semibold">{withError(kept.einsteinRadiusArcsec, kept.errorArcsec, '″')}</span>
        <span className="text-note text-mute">
          {KIND_WORDS[kept.kind]} by {kept.own ? 'you' : kept.by}, {moment(kept.at)}
        </span>
      </p>
      {apart ? (
        <p className="text-note">
          Lies apart from the others by more than 3 errors: look whether the same arc was measured.
        </p>
      ) : null}
      {mass ? (
        <p className="figures text-note text-mute">
          σ {threeDigits(mass.velocityDispersionKmS.value)} km/s, M {powerOfTen(mass.massSolar.value)} M☉
          {mass.isAssumed ? ', redshifts assumed' : ''}
        </p>
      ) : null}
      {kept.remark ? <p className="text-small [overflow-wrap:anywhere] whitespace-pre-line">{kept.remark}</p> : null}
      <p className="flex flex-wrap gap-x-4">
        <TextButton className={tall} aria-pressed={shownIds.includes(kept.id)} onClick={() => onShow(kept.id)}>
          {shownIds.includes(kept.id) ? 'Hide on the picture' : 'Show on the picture'}
        </TextButton>
        <TextButton className={tall} onClick={() => onOpen(kept)}>
          Open
        </TextButton>
        {kept.own && onWithdraw ? (
          <TextButton
            className={tall}
            disabled={busy}
            onClick={async () => {
              setBusy(true)
              setAnswer(await onWithdraw(kept.id).catch(() => ({ message: 'The server did not answer. Try again.' })))
              setBusy(false)
            }}
          >
            Withdraw
          </TextButton>
        ) : null}
      </p>
      {answer.message ? <Notice tone="alarm">{answer.message}</Notice> : null}
    </li>
  )
}
