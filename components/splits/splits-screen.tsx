'use client'

import Link from 'next/link'
import { useRouter } from 'next/navigation'
import { startTransition, useLayoutEffect, useOptimistic, useRef, useState, type ReactNode } from 'react'
import { useKeySwitch } from '@/components/bench/use-key-switch'
import { useLight } from '@/components/light/use-light'
import { useLightKeys } from '@/components/light/use-light-keys'
import { counted } from '@/components/campaigns/in-words'
import type { FormState } from '@/components/ui/form-state'
import type { Talk } from '@/components/discussion/talk'
import type { FormAction } from '@/components/people/use-kept-form'
import { ButtonLink } from '@/components/ui/button'
import { TextButton } from '@/components/ui/text-button'
import { EmptyState, Notice } from '@/components/ui/notice'
import type { NewestRun } from '@/lib/work/consensus/newest-run'
import type { CandidateEvidence } from '@/lib/work/rulings/candidate-evidence'
import { describeOutcome } from '@/lib/work/rulings/describe-ruling'
import type { RecentRuling, Splits } from '@/lib/work/rulings/list-splits'
import type { RulingChoice } from '@/lib/work/rulings/ruling-input'
import { alikeInWords, alikeTo } from './alike'
import { GroupResult, GroupRulingPanel, type GroupAction, type GroupState } from './group-ruling'
import { KeyLine } from './key-line'
import { RunPanel, type RunAction } from './run-panel'
import { SplitCase } from './split-case'
import { SplitList } from './split-list'
import { SplitOrderChoice } from './split-order'
import { useSelection } from './use-selection'
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
  talk: Talk | null
  /** That reference lists know the case, in a word. */
  known?: ReactNode
  /** The ruling just made, to say so and to offer its reversal. */
  justRuled: RecentRuling | null
  /** The address names a case that is not here. */
  missing: boolean
  ruleAction: FormAction
  groupAction: GroupAction
  undoGroupAction: GroupAction
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
  const { order: sort } = splits
  const hrefOf = (caseId: number) =>
    `/campaigns/${slug}/splits?case=${caseId}${sort === 'worth' ? '' : `&sort=${sort}`}`
  const selection = useSelection(splits.cases.map((one) => one.id))
  const [group, setGroup] = useState<GroupState['group']>()
  const views = evidence?.pictures.views.length ?? 0
  const judgement = evidence?.judgement ?? null

  const order = [...splits.cases.map((one) => one.id), ...splits.ruled.map((one) => one.candidateId)]
  const goTo = (target: number | undefined) => {
    if (target === undefined || target === chosenId) return
    startTransition(() => {
      showChosen(target)
      router.push(hrefOf(target), { scroll: false })
    })
  }
  const neighbour = (step: 1 | -1) => {
    const here = order.indexOf(chosenId ?? -1)
    return order[here < 0 ? 0 : here + step]
  }
  const move = (step: 1 | -1) => goTo(neighbour(step))
  const selectOn = (step: 1 | -1) => {
    const both = [chosenId, neighbour(step)].filter((one) => splits.cases.some((listed) => listed.id === one))
    selection.add(both as number[])
    move(step)
  }
  const alike = chosenId === null ? [] : alikeTo(splits.cases, chosenId)
  /** What came of a ruling on several is told above the case, which moves on to the first split that is left. */
  const ruleOnSelected = async (before: FormState, form: FormData): Promise<FormState> => {
    const { group: outcome, ...after } = await props.groupAction(before, form)
    if (outcome) {
      setGroup(outcome)
      setNow({ ...now, choice: null })
      const done = new Set(outcome.ruled.map(({ candidateId }) => candidateId))
      if (done.has(chosenId ?? 0)) goTo(order.find((one) => !done.has(one)))
    }
    return after
  }
  const undoGroup = async (before: FormState, form: FormData): Promise<FormState> => {
    const { group: outcome, ...after } = await props.undoGroupAction(before, form)
    if (outcome) setGroup(outcome)
    return after
  }
  const choose = (choice: RulingChoice) => {
    if (choice === 'by-verdict' && (selection.ids.length > 0 || !judgement?.standingRuling)) return
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
    if (command.do === 'select' && splits.cases.some((one) => one.id === chosenId)) selection.toggle(chosenId!, false)
    if (command.do === 'select on') selectOn(command.step)
    if (command.do === 'select alike') selection.add(alike)
    if (command.do === 'select none') selection.clear()
  })

  const place = splits.cases.findIndex((one) => one.id === id)
  const groupPanel =
    selection.ids.length > 0 ? (
      <GroupRulingPanel
        cases={splits.cases.filter((one) => selection.has(one.id))}
        choice={now.choice}
        onChoose={choose}
        reasonRef={reasonRef}
        keys={keysOn}
        action={ruleOnSelected}
        onGo={goTo}
        onClear={selection.clear}
      />
    ) : null
  const next = place < 0 ? splits.cases[0] : (splits.cases[place + 1] ?? splits.cases[place - 1])
  return (
    <div className="grid lg:h-dvh lg:grid-cols-[23.5rem_minmax(0,1fr)] lg:grid-rows-[minmax(0,1fr)_auto]">
      <div className="flex min-h-0 min-w-0 flex-col lg:border-r lg:border-line">
        <header className="px-5 pb-3 pt-5">
          <h1 className="text-title font-semibold">
            {splits.total > 0 ? counted(splits.total, 'split') : props.run ? 'Nothing is split' : 'No splits yet'}
          </h1>
          {splits.total > 0 ? (
            <SplitOrderChoice
              order={sort}
              method={splits.method}
              onChoose={(order) => router.push(`/campaigns/${slug}/splits${order === 'worth' ? '' : `?sort=${order}`}`)}
            />
          ) : (
            <p className="text-note text-mute">
              {props.run ? 'The rule could decide whatever has its grades.' : 'They come with the first consensus run.'}
            </p>
          )}
          {place >= 0 && alike.length > 1 ? (
            <TextButton onClick={() => selection.add(alike)}>
              Select the {alike.length} {alikeInWords(splits.cases[place])}
            </TextButton>
          ) : null}
        </header>
        <SplitList splits={splits} chosenId={chosenId} hrefOf={hrefOf} selection={selection} />
      </div>
      <div className="flex min-h-0 min-w-0 flex-col border-t border-line lg:col-start-2 lg:row-span-2 lg:row-start-1 lg:border-t-0">
        {group ? <GroupResult group={group} undo={undoGroup} onDismiss={() => setGroup(undefined)} /> : null}
        {props.justRuled && !group ? (
          <JustRuled ruling={props.justRuled} href={hrefOf(props.justRuled.candidateId)} />
        ) : null}
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
                group={groupPanel}
                talk={props.talk}
                known={props.known}
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
