'use client'

import { useCallback, useState } from 'react'
import { PageHead } from '@/components/campaigns/page-head'
import type { FormAction } from '@/components/people/use-kept-form'
import { Button, ButtonLink } from '@/components/ui/button'
import { EmptyState, Notice } from '@/components/ui/notice'
import { TryRule } from './try-rule'
import { useWhatIf } from './use-what-if'
import { WhatIfLoading } from './what-if-loading'

export interface WhatIfScreenProps {
  slug: string
  /** thresholds that the address tells */
  query: Record<string, string>
  action: FormAction
}

/** Thresholds that can be moved to see what would become of the candidates, before anything is done. */
export function WhatIfScreen({ slug, query, action }: WhatIfScreenProps) {
  const { columns, fault, again } = useWhatIf(slug)
  const [made, setMade] = useState<string | null>(null)
  const onMade = useCallback(
    (sentence: string) => {
      setMade(sentence)
      again()
      // The run that applies the rule is a job; by then it has most often been through.
      setTimeout(again, 5000)
    },
    [again],
  )
  const failed = fault ? (
    <Notice tone="alarm">
      <div className="flex flex-wrap items-center justify-between gap-3">
        {fault}
        <Button onClick={again}>Try again</Button>
      </div>
    </Notice>
  ) : null
  const frame = 'mx-auto flex max-w-7xl flex-col gap-6 px-5 py-8 md:px-10'
  if (!columns) return failed ? <div className={frame}>{failed}</div> : <WhatIfLoading />
  if (columns.candidates === 0 || !columns.about.reliabilities) {
    return (
      <div className={frame}>
        <PageHead title="Nothing to try a rule on yet" />
        <EmptyState
          title={columns.candidates === 0 ? 'There are no candidates' : 'No candidate has a grade that counts'}
        >
          <p>
            Once candidates are graded, move the thresholds of the rule here and see at once which of them would change.
          </p>
          <ButtonLink href={`/campaigns/${slug}/${columns.candidates === 0 ? 'intake' : 'bench'}`}>
            {columns.candidates === 0 ? 'Take cutouts in' : 'Go to the bench'}
          </ButtonLink>
        </EmptyState>
      </div>
    )
  }
  return (
    <div className={frame}>
      {failed}
      {made ? <Notice tone="done">{made}</Notice> : null}
      {/* The rule in force is where the sliders start: another version starts them anew. */}
      <TryRule
        key={columns.about.rule.version}
        slug={slug}
        columns={columns}
        query={made ? {} : query}
        action={action}
        onMade={onMade}
      />
    </div>
  )
}
