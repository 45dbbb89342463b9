'use client'

import Link from 'next/link'
import { useRouter } from 'next/navigation'
import { startTransition, useLayoutEffect, useOptimistic, useRef, useState } from 'react'
import { useKeySwitch } from '@/components/bench/use-key-switch'
import { useLight } from '@/components/light/use-light'
import { useLightKeys } from '@/components/light/use-light-keys'
import { counted } from '@/components/campaigns/in-words'
import type { FormAction } from '@/components/people/use-kept-form'
import { ButtonLink } from '@/components/ui/button'
import { EmptyState, Notice } from '@/components/ui/notice'
import type { NewestRun } from '@/lib/work/consensus/newest-run'
import type { CandidateEvidence } from '@/lib/work/rulings/candidate-evidence'
import { describeOutcome } from '@/lib/work/rulings/describe-ruling'
import type { RecentRuling, Splits } from '@/lib/work/rulings/list-splits'
import type { RulingChoice } from '@/lib/work/rulings/ruling-input'
import { KeyLine } from './key-line'
import { RunPanel, type RunAction } from './run-panel'
import { SplitCase } from './split-case'
import { SplitList } from './split-list'
import { useSplitKeys } from './use-split-keys'

export interface SplitsScreenProps {
  slug: string
  personId: number
  splits: Splits
  run: NewestRun | null
  /** Candidates that are not decided now, whatever the newest run knew. */
  open: number
  evidence: CandidateEvidence | null
  decides: string[]
  /** The ruling just made, to say so and to offer its reversal. */
  justRuled: RecentRuling | null
  /** The address names a case that is not here. */
  missing: boolean
  ruleAction: FormAction
  runAction: RunAction
}

interface PerCase {
  id: number | null
  view: number
  choice: RulingChoice | null
}

/** Where a lead settles disagreements: the splits at the left, the chosen case at the right, the ruling at the bottom. */
export function SplitsScreen(props: SplitsScreenProps) {
  const { slug, splits, evidence } = props
  const router = useRouter()
  const [keysOn, setKeysOn] = useKeySwitch(props.personId)
  const [chosenId, showChosen] = useOptimistic(evidence?.id ?? null)
  const id = evidence?.id ?? null
  const [now, setNow] = useState<PerCase>({ id, view: 0, choice: null })
  // View and choice belong to one case: another case, and one that is come back to, starts afresh.
  if (now.id !== id) setNow({ id, view: 0, choice: null })
  const reasonRef = useRef<HTMLTextAreaElement>(null)
  const hrefOf = (caseId: number) => `/campaigns/${slug}/splits?case=${caseId}`
  const views = evidence?.pictures.views.length ?? 0
  const judgement = evidence?.judgement ?? null

  const order = [...splits.cases.map((one) => one.id), ...splits.ruled.map((one) => one.candidateId)]
  const move = (step: 1 | -1) => {
    const here = order.indexOf(chosenId ?? -1)
    const target = order[here < 0 ? 0 : here + step]
    if (target === undefined || target === chosenId) return
    startTransition(() => {
      showChosen(target)
      router.push(hrefOf(target), { scroll: false })
    })
  }
  const choose = (choice: RulingChoice) => {
    if (choice === 'by-verdict' && !judgement?.standingRuling) return
    // The focus stays: whoever goes on with R, as the line of keys says, would else write that letter into the reason.
    setNow({ ...now, choice })
  }
  const light = useLight(props.personId, slug)
  const [blinking, setBlinking] = useState(false)
  useLayoutEffect(() => light.show(id), [light, id])
  useLightKeys(keysOn && evidence !== null, light, setBlinking)
  useSplitKeys(keysOn, (command) => {
    if (command.do === 'move') move(command.step)
    if (command.do === 'view' && command.index < views) setNow({ ...now, view: command.index })
    if (command.do === 'next view' && views > 0) setNow({ ...now, view: (now.view + command.step + views) % views })
    if (command.do === 'choose') choose(command.choice)
    if (command.do === 'reason') reasonRef.current?.focus()
  })

  const place = splits.cases.findIndex((one) => one.id === id)
  const next = place < 0 ? splits.cases[0] : (splits.cases[place + 1] ?? splits.cases[place - 1])
  return (
    <div className="grid lg:h-dvh lg:grid-cols-[23.5rem_minmax(0,1fr)] lg:grid-rows-[minmax(0,1fr)_auto]">
      <div className="flex min-h-0 min-w-0 flex-col lg:border-r lg:border-line">
        <header className="px-5 pb-3 pt-5">
          <h1 className="text-title font-semibold">
            {splits.total > 0 ? counted(splits.total, 'split') : props.run ? 'Nothing is split' : 'No splits yet'}
          </h1>
          <p className="text-note text-mute">
            {splits.total > 0
              ? 'The likeliest lenses first'
              : props.run
                ? 'The rule could decide whatever has its grades.'
                : 'They come with the first consensus run.'}
          </p>
        </header>
        <SplitList splits={splits} chosenId={chosenId} hrefOf={hrefOf} />
      </div>
      <div className="flex min-h-0 min-w-0 flex-col border-t border-line lg:col-start-2 lg:row-span-2 lg:row-start-1 lg:border-t-0">
        {props.justRuled ? <JustRuled ruling={props.justRuled} href={hrefOf(props.justRuled.candidateId)} /> : null}
        {props.missing ? (
          <div className="px-5 pt-4">
            <Notice tone="alarm">
              The address names a case that is not in this campaign. Here is the first split instead.
            </Notice>
          </div>
        ) : null}
        {evidence && judgement ? (
          <>
            <div className="min-h-0 flex-1">
              <SplitCase
                key={evidence.id}
                slug={slug}
                evidence={evidence}
                judgement={judgement}
                decides={props.decides}
                nextId={next && next.id !== id ? next.id : null}
                action={props.ruleAction}
                controls={{
                  view: now.view,
                  onView: (view) => setNow({ ...now, view }),
                  choice: now.choice,
                  onChoose: choose,
                  reasonRef,
                  keys: keysOn,
                  light,
                  blinking,
                }}
              />
            </div>
            <KeyLine on={keysOn} onSwitch={setKeysOn} />
          </>
        ) : (
          <NothingSplit slug={slug} run={props.run} open={props.open} />
        )}
      </div>
      <div className="border-t border-line lg:col-start-1 lg:row-start-2 lg:border-r">
        <RunPanel run={props.run} action={props.runAction} whatIfHref={`/campaigns/${slug}/what-if`} />
      </div>
    </div>
  )
}

function JustRuled({ ruling, href }: { ruling: RecentRuling; href: string }) {
  return (
    <div
      role="status"
      className="flex flex-wrap items-center gap-x-3 border-b border-line bg-raise px-5 py-2 text-small"
    >
      <span>
        <span className="figures">{ruling.name}</span> is {describeOutcome(ruling)}.
      </span>
      <Link
        href={href}
        scroll={false}
        className="text-mute underline decoration-edge underline-offset-4 hover:text-text"
      >
        Reverse this ruling
      </Link>
    </div>
  )
}

function NothingSplit({ slug, run, open }: { slug: string; run: NewestRun | null; open: number }) {
  const home = `/campaigns/${slug}`
  if (!run) {
    return (
      <div className="p-5">
        <EmptyState title="No consensus has run yet">
          <p>
            Splits come from a consensus run. It starts by itself once candidates have their grades, or by the button.
          </p>
          <ButtonLink href={home}>See how far the grading is</ButtonLink>
        </EmptyState>
      </div>
    )
  }
  return (
    <div className="p-5">
      <EmptyState title="Nothing to settle">
        <p>
          {open > 0
            ? `${counted(open, 'candidate')} still ${open === 1 ? 'waits' : 'wait'} for grades; splits among them will come up here.`
            : 'Every candidate is decided. The catalogue is ready to be read and exported.'}
        </p>
        {open > 0 ? (
          <ButtonLink href={`${home}/candidates`}>See the open candidates</ButtonLink>
        ) : (
          <ButtonLink tone="lamp" href={`${home}/catalogue`}>
            To the catalogue
          </ButtonLink>
        )}
      </EmptyState>
    </div>
  )
}
