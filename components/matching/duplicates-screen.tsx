'use client'

import { useRef, useState } from 'react'
import { useKeySwitch } from '@/components/bench/use-key-switch'
import { counted } from '@/components/campaigns/in-words'
import type { FormState } from '@/components/ui/form-state'
import { FormNote } from '@/components/people/form-note'
import { useKeptForm, type FormAction } from '@/components/people/use-kept-form'
import { KeyLine } from '@/components/splits/key-line'
import { Button, ButtonLink } from '@/components/ui/button'
import { EmptyState, Notice } from '@/components/ui/notice'
import type { DuplicatesPage } from '@/lib/work/matching/duplicates-page'
import { DecidedList } from './decided-list'
import { DuplicateCase } from './duplicate-case'
import { likeliestKept } from './likeliest-kept'
import { DUPLICATE_KEYS } from './duplicate-keys'
import { useDuplicateKeys } from './use-duplicate-keys'

export interface DuplicatesScreenProps {
  slug: string
  personId: number
  page: DuplicatesPage
  mergeAction: FormAction
  differAction: FormAction
  partAction: FormAction
  againAction: FormAction
  radiusAction: FormAction
}

const keyOf = ({ members }: DuplicatesPage['groups'][number]) => members.map(({ id }) => id).join(' ')

/** Candidates that may be one object: the groups in a row, the chosen one large, and below what was decided. */
export function DuplicatesScreen(props: DuplicatesScreenProps) {
  const { slug, page } = props
  const { groups, total, radiusArcsec, due } = page
  const [keysOn, setKeysOn] = useKeySwitch(props.personId)
  const [at, setAt] = useState(0)
  /** Place of the member that is kept; null: the one that most speaks for. */
  const [kept, setKept] = useState<number | null>(null)
  const [said, setSaid] = useState<FormState>({})
  const mergeRef = useRef<HTMLTextAreaElement>(null)
  const differRef = useRef<HTMLTextAreaElement>(null)
  const place = Math.min(at, Math.max(0, groups.length - 1))
  const group = groups[place]
  const goTo = (next: number) => {
    if (next < 0 || next >= groups.length) return
    setAt(next)
    setKept(null)
  }
  /** What came of it is told above, since the group goes. */
  const telling =
    (action: FormAction): FormAction =>
    async (before, form) => {
      const after = await action(before, form)
      if (after.done) {
        setSaid(after)
        setKept(null)
      }
      return after
    }
  useDuplicateKeys(keysOn && group !== undefined, (command) => {
    if (command.do === 'move') goTo(place + command.step)
    if (command.do === 'keep' && group && command.place < group.members.length) setKept(command.place)
    if (command.do === 'same') mergeRef.current?.focus()
    if (command.do === 'different') differRef.current?.focus()
  })
  return (
    <div className="flex flex-col gap-6 px-4 py-5 md:px-8 md:py-6">
      <header className="flex flex-wrap items-end justify-between gap-x-8 gap-y-3">
        <div className="flex max-w-2xl flex-col gap-1">
          <h1 className="text-title font-semibold">
            {total === 0
              ? 'No candidate is proposed twice'
              : total === 1
                ? '1 group that may be one object'
                : `${counted(total, 'group')}, each of which may be one object`}
          </h1>
          <p className="text-small text-mute">
            Candidates within {radiusArcsec}″ of each other by great-circle distance.
            {due > 0 ? ` ${counted(due, 'candidate')} still ${due === 1 ? 'waits' : 'wait'} to be matched.` : ''}
          </p>
        </div>
        <RadiusForm key={radiusArcsec} radiusArcsec={radiusArcsec} action={props.radiusAction} />
      </header>
      {said.done ? <Notice tone="done">{said.done}</Notice> : null}
      {group ? (
        <>
          {groups.length > 1 ? (
            <nav aria-label="Groups" className="flex flex-wrap items-center gap-3 text-small">
              <Button disabled={place === 0} onClick={() => goTo(place - 1)}>
                Previous
              </Button>
              <span className="figures" role="status">
                {place + 1} of {groups.length}
                {total > groups.length ? `, the nearest of ${total.toLocaleString('en')}` : ''}
              </span>
              <Button disabled={place === groups.length - 1} onClick={() => goTo(place + 1)}>
                Next
              </Button>
            </nav>
          ) : null}
          <DuplicateCase
            key={keyOf(group)}
            slug={slug}
            group={group}
            radiusArcsec={radiusArcsec}
            kept={kept ?? likeliestKept(group)}
            onKeep={setKept}
            keys={keysOn}
            mergeAction={telling(props.mergeAction)}
            differAction={telling(props.differAction)}
            mergeRef={mergeRef}
            differRef={differRef}
          />
          <div className="-mx-4 md:-mx-8">
            <KeyLine on={keysOn} onSwitch={setKeysOn} keys={DUPLICATE_KEYS} />
          </div>
        </>
      ) : (
        <EmptyState title="Nothing to merge">
          <p>
            {due > 0
              ? 'Candidates are being matched; look again in a moment.'
              : 'No two candidates that wait for a decision are this near to each other. A wider radius finds more.'}
          </p>
          <ButtonLink href={`/campaigns/${slug}/known`}>See the known objects</ButtonLink>
        </EmptyState>
      )}
      <DecidedList
        slug={slug}
        page={page}
        partAction={telling(props.partAction)}
        againAction={telling(props.againAction)}
      />
    </div>
  )
}

function RadiusForm({ radiusArcsec, action }: { radiusArcsec: number; action: FormAction }) {
  const { state, pending, formProps } = useKeptForm(action)
  const fault = state.errors?.radiusArcsec
  return (
    <form {...formProps} aria-label="How near" className="flex flex-col gap-1">
      <div className="flex items-end gap-2.5">
        <label className="flex flex-col gap-1 text-note text-mute">
          Radius, arcsec
          <input
            name="radiusArcsec"
            inputMode="decimal"
            defaultValue={radiusArcsec}
            aria-invalid={fault ? true : undefined}
            className="min-h-9 w-24 rounded-control border border-edge bg-well px-3 text-body text-text aria-invalid:border-alarm"
          />
        </label>
        <Button type="submit" disabled={pending}>
          Change
        </Button>
      </div>
      {fault ? <p className="text-note text-alarm">{fault}</p> : <FormNote state={state.done ? {} : state} />}
    </form>
  )
}
