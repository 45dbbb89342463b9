'use client'

import { useDeferredValue, useEffect, useMemo, useState } from 'react'
import Link from 'next/link'
import { counted, moment } from '@/components/campaigns/in-words'
import { PageHead } from '@/components/campaigns/page-head'
import type { FormAction } from '@/components/people/use-kept-form'
import { Button } from '@/components/ui/button'
import { Notice, VisualGradeCaution } from '@/components/ui/notice'
import type { RuleInput } from '@/lib/work/campaigns/rule-input'
import { qualityCurve } from '@/lib/work/consensus/quality-curve'
import { tryRule } from '@/lib/work/consensus/try-rule'
import type { WhatIfAbout, WhatIfColumns } from '@/lib/work/consensus/what-if-columns'
import { ChangedList } from './changed-list'
import { MakeRule } from './make-rule'
import { QualityPlot } from './quality-plot'
import { QualityTable, share } from './quality-table'
import { scoreBins } from './score-bins'
import { ScoreHistogram } from './score-histogram'
import { StateCounts } from './state-counts'
import { ThresholdField } from './threshold-field'
import {
  addressOf,
  isSameRule,
  problemOf,
  ruleFromAddress,
  startOf,
  THRESHOLDS,
  valueOf,
  withValue,
  type Method,
} from './thresholds'

const METHODS: { method: Method; label: string }[] = [
  { method: 'mean', label: 'Mean' },
  { method: 'reliability', label: 'Reliability' },
]

/** The address follows the sliders when they rest, so that it can be sent to a colleague. */
function useAddress(rule: RuleInput, inForce: RuleInput): void {
  useEffect(() => {
    const timer = setTimeout(() => {
      const address = `${window.location.pathname}${addressOf(rule, inForce)}`
      if (address !== window.location.pathname + window.location.search) window.history.replaceState(null, '', address)
    }, 300)
    return () => clearTimeout(timer)
  }, [rule, inForce])
}

/** The tried rule, or while that cannot be used the last that could. */
function useUsable(rule: RuleInput, inForce: RuleInput): { usable: RuleInput; problem: string | null } {
  const problem = problemOf(rule)
  const [last, setLast] = useState(problem ? inForce : rule)
  if (!problem && last !== rule) setLast(rule)
  return { usable: problem ? last : rule, problem }
}

export function TryRule({
  slug,
  columns,
  query,
  action,
  onMade,
}: {
  slug: string
  columns: WhatIfColumns
  query: Readonly<Record<string, string>>
  action: FormAction
  onMade: (sentence: string) => void
}) {
  const { about } = columns
  const inForce = about.rule
  const [rule, setRule] = useState(() => ruleFromAddress(query, inForce))
  /** what was set for the other method, for coming back to it */
  const [kept, setKept] = useState<Partial<Record<Method, RuleInput>>>({})
  useAddress(rule, inForce)
  const { usable, problem } = useUsable(rule, inForce)
  // The sliders stay ahead of the counting, however many candidates there are.
  const tried = useDeferredValue(usable)
  const trial = useMemo(() => tryRule(columns, tried), [columns, tried])
  const present = useMemo(() => tryRule(columns, inForce), [columns, inForce])
  const curve = useMemo(() => qualityCurve(columns, tried), [columns, tried])
  const bins = useMemo(() => scoreBins(columns, tried), [columns, tried])
  const same = isSameRule(rule, inForce)
  const choose = (method: Method) => {
    if (method === rule.method) return
    setKept({ ...kept, [rule.method]: rule })
    setRule(kept[method] ?? startOf(method, inForce))
  }
  return (
    <>
      <PageHead
        title={trial.changed === 0 ? 'Nothing would change' : `${counted(trial.changed, 'candidate')} would change`}
        lead={
          same
            ? `Version ${inForce.version} of the rule is set. Move a threshold to see what another rule would do; nothing is done by it.`
            : `Beside what they are now, by version ${inForce.version} of the rule. Nothing is done by moving thresholds.`
        }
      />
      <div className="max-md:sticky max-md:top-0 max-md:z-20 max-md:-mx-5 max-md:border-b max-md:border-line max-md:bg-page max-md:px-5 max-md:py-2">
        <StateCounts trial={trial} />
      </div>
      <div className="grid gap-x-10 gap-y-8 lg:grid-cols-[20rem_minmax(0,1fr)]">
        <section aria-label="The rule that is tried" className="flex flex-col gap-5">
          <div
            role="radiogroup"
            aria-label="Method"
            className="grid grid-cols-2 rounded-control border border-edge/50 p-0.5"
          >
            {METHODS.map(({ method, label }) => (
              <label
                key={method}
                className="flex min-h-9 items-center justify-center rounded-control px-2 text-center text-small has-checked:bg-raise has-checked:font-semibold has-focus-visible:outline-2 has-focus-visible:outline-text"
              >
                <input
                  type="radio"
                  name="method"
                  className="sr-only"
                  checked={rule.method === method}
                  onChange={() => choose(method)}
                />
                {label}
                {inForce.method === method ? <span className="text-mute">&nbsp;(now)</span> : null}
              </label>
            ))}
          </div>
          {THRESHOLDS[rule.method].map((threshold) => (
            <ThresholdField
              key={`${rule.method} ${threshold.name}`}
              threshold={threshold}
              value={valueOf(rule, threshold.name)}
              inForce={inForce.method === rule.method ? valueOf(inForce, threshold.name) : null}
              onChange={(value) => setRule(withValue(rule, threshold.name, value))}
            />
          ))}
          {problem ? (
            <Notice tone="alarm">{problem} The numbers are those of the last rule that could be used.</Notice>
          ) : null}
          <div className="flex flex-wrap gap-3">
            <MakeRule
              rule={usable}
              trial={trial}
              version={inForce.version}
              disabled={same || problem !== null}
              action={action}
              onMade={onMade}
            />
            <Button
              disabled={same}
              onClick={() => {
                setKept({})
                setRule(startOf(inForce.method, inForce))
              }}
            >
              Back to the rule in force
            </Button>
          </div>
          <Sources
            about={about}
            changedByRun={present.changed}
            heldByRuling={trial.heldByRuling}
            dropped={trial.dropped}
            slug={slug}
          />
        </section>
        <div className="flex min-w-0 flex-col gap-8">
          <div className="grid gap-x-10 gap-y-8 xl:grid-cols-2">
            <div className="flex min-w-0 flex-col gap-6">
              <QualityTable trial={trial} lensShare={about.lensShare} />
              <ScoreHistogram bins={bins} rule={tried} lensShare={about.lensShare} />
            </div>
            <QualityPlot curve={curve} rule={tried} inForce={present} trial={trial} />
          </div>
          <section aria-label="Candidates that would change" className="flex flex-col gap-3 border-t border-line pt-5">
            <h2 className="text-body font-semibold">Which would change</h2>
            <ChangedList slug={slug} columns={columns} trial={trial} />
            <VisualGradeCaution />
          </section>
        </div>
      </div>
    </>
  )
}

/** Where the numbers come from, and what of the changes is not the rule's doing. */
function Sources({
  about,
  changedByRun,
  heldByRuling,
  dropped,
  slug,
}: {
  about: WhatIfAbout
  changedByRun: number
  heldByRuling: number
  dropped: number
  slug: string
}) {
  const { reliabilities, gradesSinceRun, lensShare, graders, leftOut } = about
  return (
    <div className="flex flex-col gap-1.5 border-t border-line pt-4 text-note text-mute">
      <p>
        {reliabilities?.from === 'run'
          ? `Reliabilities of ${counted(graders, 'grader')} are those of the newest run, ${moment(reliabilities.at)}.`
          : `The newest run has no reliabilities, so those of ${counted(graders, 'grader')} were fitted for this page to the grades that stand now.`}{' '}
        They find {share(lensShare)} lenses among the candidates.
        {leftOut > 0 ? ` ${counted(leftOut, 'grader')} ${leftOut === 1 ? 'is' : 'are'} left out.` : ''}
      </p>
      {changedByRun > 0 ? (
        <p>
          {counted(changedByRun, 'candidate')} would change under the rule in force too
          {gradesSinceRun ? `: ${counted(gradesSinceRun, 'grade')} came since the newest run` : ''}.{' '}
          <Link href={`/campaigns/${slug}/splits`} className="underline underline-offset-4">
            Run the consensus
          </Link>{' '}
          to see the rule’s doing alone.
        </p>
      ) : null}
      {dropped > 0 ? (
        <p>
          {counted(dropped, 'candidate')} {dropped === 1 ? 'is' : 'are'} set aside by the first pass, which no rule
          changes, and in no completeness here: that is of what came to the bench.
        </p>
      ) : null}
      {heldByRuling > 0 ? (
        <p>
          {counted(heldByRuling, 'candidate')} would be otherwise by this rule, but a ruling stands, which no rule
          changes.
        </p>
      ) : null}
    </div>
  )
}
