'use client'

import { useActionState } from 'react'
import type { FormState } from '@/app/_lib/form-state'
import { counted, moment } from '@/components/campaigns/in-words'
import { FormNote } from '@/components/people/form-note'
import { Button } from '@/components/ui/button'
import { alphaInWords, kappaInWords } from './agreement-words'
import type { NewestRun } from '@/lib/work/consensus/newest-run'

export type RunAction = (state: FormState) => Promise<FormState>

function Measure({
  name,
  value,
  words,
  note,
}: {
  name: string
  value: number | null
  words: string
  note: string | null
}) {
  return (
    <div className="min-w-0 flex-1 basis-36">
      <dt className="text-note text-mute">{name}</dt>
      <dd>
        <span className="figures text-title">{value === null ? '–' : value.toFixed(2).replace('-', '−')}</span>{' '}
        <span className="text-small">{value === null ? 'not defined' : words}</span>
        <span className="block text-note text-mute">{note}</span>
      </dd>
    </div>
  )
}

/** The newest consensus run in numbers and words, and the button that runs it now. */
export function RunPanel({ run, action }: { run: NewestRun | null; action: RunAction }) {
  const [state, submit, pending] = useActionState(action, {})
  const { summary } = run ?? {}
  return (
    <section aria-label="Consensus" className="flex flex-col gap-3 px-5 py-4">
      <div className="flex flex-wrap items-center justify-between gap-2">
        <h2 className="text-small font-semibold">
          {run ? `Consensus run of ${moment(run.createdAt)}` : 'The consensus has not run yet'}
        </h2>
        <form action={submit}>
          <Button type="submit" disabled={pending}>
            {pending ? 'Running…' : 'Run consensus now'}
          </Button>
        </form>
      </div>
      <FormNote state={state} />
      {summary ? (
        <>
          <p className="text-note text-mute">
            {counted(summary.grades, 'grade')} of {counted(summary.graders, 'grader')} on{' '}
            {counted(summary.candidates, 'candidate')}, rule version {run?.ruleVersion}. Verdicts: {summary.confirmed}{' '}
            confirmed, {summary.setAside} set aside, {summary.split} split, {summary.open} open.
          </p>
          <dl className="flex flex-wrap gap-x-5 gap-y-2">
            <Measure
              name="Krippendorff’s α, ordinal"
              value={summary.alphaOrdinal}
              words={summary.alphaOrdinal === null ? '' : alphaInWords(summary.alphaOrdinal)}
              note={summary.alphaNote}
            />
            <Measure
              name="Fleiss’ κ"
              value={summary.fleissKappa}
              words={summary.fleissKappa === null ? '' : kappaInWords(summary.fleissKappa)}
              note={summary.kappaNote}
            />
          </dl>
        </>
      ) : (
        <p className="text-note text-mute">
          It runs by itself as soon as a candidate has its grades, and at any time by this button. Running it again
          without new grades changes nothing.
        </p>
      )}
    </section>
  )
}
