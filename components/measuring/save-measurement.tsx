'use client'

import { useId, useRef, useState } from 'react'
import { makeUid } from '@/components/bench/make-uid'
import { Button } from '@/components/ui/button'
import { Notice } from '@/components/ui/notice'
import type { MeasuredShape } from '@/lib/work/measuring/measurement-input'
import type { RedshiftChoices } from '@/lib/work/measuring/redshift-choice'
import type { SkyVector } from '@/lib/science/lensing/sis'

/** What goes to the server; it works the numbers out again. */
export interface MeasurementToSave {
  uid: string
  view: string
  pixelScaleArcsec: number
  points: readonly SkyVector[]
  shape: MeasuredShape
  redshifts: RedshiftChoices
  remark: string
}

export interface SaveAnswer {
  done?: string
  message?: string
}

export type SaveAction = (measurement: MeasurementToSave) => Promise<SaveAnswer>

/** Remark and the one action of the desk. What was typed stays until it is kept; sending it again keeps it once. */
export function SaveMeasurement({
  ready,
  why,
  replaces,
  doubt = null,
  onSave,
}: {
  /** null while there is nothing that could be kept. */
  ready: Omit<MeasurementToSave, 'uid' | 'remark'> | null
  /** Why there is nothing to keep, a sentence. */
  why: string | null
  /** An own earlier one of this sort stands. */
  replaces: boolean
  /** What speaks against keeping it, a sentence: it is kept once that has been read and confirmed. */
  doubt?: string | null
  onSave: SaveAction
}) {
  const id = useId()
  const [remark, setRemark] = useState('')
  const [answer, setAnswer] = useState<SaveAnswer>({})
  const [saving, setSaving] = useState(false)
  const [confirmed, setConfirmed] = useState(false)
  const uid = useRef<{ of: string; uid: string } | null>(null)
  const save = async () => {
    if (!ready || saving) return
    // The same numbers are the same measurement, also where the answer to the first sending was lost.
    const of = JSON.stringify([ready, remark])
    if (uid.current?.of !== of) uid.current = { of, uid: makeUid() }
    setSaving(true)
    const answered = await onSave({ ...ready, uid: uid.current.uid, remark }).catch(() => ({
      message: 'The server did not answer. Everything is still here; try again in a moment.',
    }))
    setSaving(false)
    setAnswer(answered)
    if ('done' in answered && answered.done) {
      setRemark('')
      setConfirmed(false)
      uid.current = null
    }
  }
  return (
    <div className="flex flex-col gap-2">
      <label htmlFor={id} className="text-note text-mute">
        Remark
      </label>
      <textarea
        id={id}
        rows={2}
        maxLength={2000}
        value={remark}
        onChange={(event) => setRemark(event.target.value)}
        className="rounded-control border border-edge bg-well px-2.5 py-1.5 text-small"
      />
      {ready && doubt ? (
        <label className="flex min-h-7 items-start gap-2 border-l-4 border-split pl-2.5 text-note">
          <input
            type="checkbox"
            checked={confirmed}
            onChange={(event) => setConfirmed(event.target.checked)}
            className="mt-0.5 size-4 shrink-0 accent-lamp"
          />
          <span>{doubt} Keep it all the same.</span>
        </label>
      ) : null}
      <div className="flex flex-wrap items-center gap-x-4 gap-y-2">
        <Button tone="lamp" disabled={!ready || saving || (doubt !== null && !confirmed)} onClick={save}>
          {saving ? 'Saving…' : replaces ? 'Save in place of your earlier one' : 'Save'}
        </Button>
        {ready ? null : why ? <p className="min-w-0 flex-1 basis-40 text-note text-mute">{why}</p> : null}
      </div>
      {answer.message ? <Notice tone="alarm">{answer.message}</Notice> : null}
      {answer.done ? <Notice tone="done">{answer.done}</Notice> : null}
    </div>
  )
}
