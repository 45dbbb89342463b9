'use client'

import Link from 'next/link'
import { useActionState } from 'react'
import type { FormState } from '@/components/ui/form-state'
import { counted, moment } from '@/components/campaigns/in-words'
import { FormNote } from '@/components/people/form-note'
import { Button } from '@/components/ui/button'
import { alphaInWords, kappaInWords } from './agreement-words'
import type { NewestRun } from '@/lib/work/consensus/newest-run'

export type RunAction = (state: FormState) => Promise<FormState>

function Measure({ name, value, words }: { name: string; value: number | null; words: string }) {
  return (
    <div className="flex items-baseline justify-between gap-3">
      <dt className="text-small text-mute">{name}</dt>
      <dd className="whitespace-nowrap text-small">
        {words} <span className="figures text-title">{value === null ? '–' : value.toFixed(2).replace('-', '−')}</span>
      </dd>
    </div>
  )
}

/** The newest consensus run in numbers and words, and the button that runs it now. */
export function RunPanel({
  run,
  action,
  whatIfHref,
}: {
  run: NewestRun | null
  action: RunAction
  whatIfHref: string
}) {
  const [state, submit, pending] = useActionState(action, {})
  const { summary } = run ?? {}
  return (
    <section aria-label="Consensus" className="flex flex-col gap-3 px-5 py-4">
      <div className="flex items-center justify-between gap-3">
        <div>
          <h2 className="text-small font-semibold">{run ? 'Newest consensus' : 'Consensus'}</h2>
          {run ? (
            <p className="text-note text-mute">{moment(run.createdAt)}</p>
          ) : (
            <p className="text-note text-mute">not run yet</p>
          )}
        </div>
        <form action={submit}>
          <Button tone={run ? 'plain' : 'lamp'} type="submit" disabled={pending} className="whitespace-nowrap">
            {pending ? 'Running…' : 'Run consensus now'}
          </Button>
        </form>
      </div>
      <FormNote state={state} />
      {run ? (
        <Link href={whatIfHref} className="self-start text-note text-mute underline underline-offset-4 hover:text-text">
          What if the thresholds were others?
        </Link>
      ) : null}
      {summary ? (
        <>
          <dl className="flex flex-col gap-0.5">
            <Measure
              name="Krippendorff’s α, ordinal"
              value={summary.alphaOrdinal}
              words={summary.alphaOrdinal === null ? 'not defined' : alphaInWords(summary.alphaOrdinal)}
            />
            <Measure
              name="Fleiss’ κ"
              value={summary.fleissKappa}
              words={summary.fleissKappa === null ? 'not defined' : kappaInWords(summary.fleissKappa)}
            />
          </dl>
          <details className="text-note text-mute">
            <summary className="min-h-6">What these are over</summary>
            <div className="flex flex-col gap-1.5 pt-1">
              <p>
                {counted(summary.grades, 'grade')} of {counted(summary.graders, 'grader')} on{' '}
                {counted(summary.candidates, 'candidate')}, rule version {run?.ruleVersion}. Verdicts by the grades
                alone: {summary.confirmed} confirmed, {summary.setAside} set aside, {summary.split} split,{' '}
                {summary.open} open. Pages count states, which rulings change.
              </p>
              <p>α: {summary.alphaNote} Krippendorff asks for 0.80, and for 0.67 where conclusions are tentative.</p>
              <p>κ: {summary.kappaNote} Its words are those of Landis and Koch (1977).</p>
            </div>
          </details>
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
