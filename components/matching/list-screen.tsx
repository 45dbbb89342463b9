'use client'

import Link from 'next/link'
import { useEffect, useState } from 'react'
import type { ListMapping } from '@/db/schema/matching'
import { FormSection } from '@/components/campaigns/form-section'
import { counted, day } from '@/components/campaigns/in-words'
import { PageHead } from '@/components/campaigns/page-head'
import { ConfirmButton } from '@/components/people/confirm-button'
import { FormNote } from '@/components/people/form-note'
import { useKeptForm, type FormAction } from '@/components/people/use-kept-form'
import { Button } from '@/components/ui/button'
import { TextField } from '@/components/ui/field'
import { Notice } from '@/components/ui/notice'
import type { KnownListWithMapping } from '@/lib/work/matching/known-page'
import type { ListLook } from '@/lib/work/matching/read-list'
import { ColumnChoices } from './column-choices'
import { FindingList } from './finding-list'
import { askLook } from './known-api'
import { ListState } from './list-table'
import { LookTable } from './look-table'

const SETTLED_MS = 250

/** One list: what it is, which of its columns hold what, how it is read, and how it matches. */
export function ListScreen({
  slug,
  list,
  look: firstLook,
  takeInAction,
  changeAction,
  retireAction,
  discardAction,
  bringBackAction,
}: {
  slug: string
  list: KnownListWithMapping
  look: ListLook
  takeInAction: FormAction
  changeAction: FormAction
  retireAction: FormAction
  discardAction: FormAction
  bringBackAction: FormAction
}) {
  const [mapping, setMapping] = useState<ListMapping>(list.mapping ?? firstLook.mapping)
  const [look, setLook] = useState(firstLook)
  const [fault, setFault] = useState<string | null>(null)
  const [isAsking, setAsking] = useState(false)
  const isSame =
    JSON.stringify({ ...mapping, allTheSame: false }) === JSON.stringify({ ...look.mapping, allTheSame: false })
  useEffect(() => {
    if (isSame) return
    const ended = new AbortController()
    const timer = setTimeout(() => {
      setAsking(true)
      askLook(slug, list.id, mapping, ended.signal).then(
        (next) => {
          setLook(next)
          setFault(null)
          setAsking(false)
        },
        (error: unknown) => {
          if (ended.signal.aborted) return
          setFault(error instanceof Error ? error.message : String(error))
          setAsking(false)
        },
      )
    }, SETTLED_MS)
    return () => {
      clearTimeout(timer)
      ended.abort()
    }
  }, [slug, list.id, mapping, isSame])

  const isReady = list.state === 'ready'
  const take = useKeptForm(takeInAction)
  const change = useKeptForm(changeAction)
  // One form with two ways to send it: a list that is there is read again only where its columns were changed.
  const changesColumns = !isReady || JSON.stringify(mapping) !== JSON.stringify(list.mapping)
  const { state, pending, formProps } = changesColumns ? take : change
  const stops = look.findings.some((finding) => finding.stops)
  const error = (field: string) => state.errors?.[field]
  const isReading = list.state === 'reading' || list.work?.does === 'reading'
  const isFixed = isReading || list.state === 'retired'

  return (
    <div className="mx-auto flex max-w-6xl flex-col gap-7 px-4 py-6 md:px-8 md:py-8">
      <Link
        href={`/campaigns/${slug}/known`}
        className="min-h-6 self-start text-note text-mute decoration-edge underline-offset-4 hover:text-text hover:underline"
      >
        All lists of known objects
      </Link>
      <PageHead
        title={list.name}
        lead={
          <span className="flex flex-wrap items-center gap-x-3 gap-y-1">
            <ListState state={list.state} />
            <span>
              <span className="figures text-small">{list.fileName}</span>, sent {day(list.uploadedAt)} by{' '}
              {list.uploadedBy}
            </span>
            {isReady ? (
              <span>
                {counted(list.rows, 'row')}, {counted(list.matched, 'candidate')} known
              </span>
            ) : null}
          </span>
        }
      >
        {list.state === 'retired' ? (
          <ConfirmButton
            label="Bring it back"
            name={`Bring ${list.name} back`}
            question={`Bring ${list.name} back?`}
            consequence="It labels candidates again; those that came meanwhile are matched with it."
            confirm="Bring it back"
            action={bringBackAction}
          />
        ) : isReading ? null : list.state === 'draft' || (list.state === 'refused' && list.rows === 0) ? (
          <ConfirmButton
            label="Throw it away"
            name={`Throw ${list.name} away`}
            question={`Throw ${list.name} away?`}
            consequence="It labels nothing yet. It goes from this page; the same file can be sent again."
            confirm="Throw the list away"
            action={discardAction}
          />
        ) : (
          <ConfirmButton
            label="Retire it"
            name={`Retire ${list.name}`}
            question={`Retire ${list.name}?`}
            consequence="It labels nothing any more. The file, its columns and its rows stay, and it can be brought back."
            confirm="Retire the list"
            action={retireAction}
          />
        )}
      </PageHead>
      {list.reason && !isReading ? (
        <Notice tone={list.state === 'refused' ? 'alarm' : 'note'}>
          {list.state === 'refused' ? (
            <p className="font-semibold">It was not taken in. The file and your choice are still here.</p>
          ) : null}
          {list.reason.split('\n').map((sentence) => (
            <p key={sentence}>{sentence}</p>
          ))}
        </Notice>
      ) : null}
      {isReading ? <Notice>It is being read. Wait until it is there, then change it.</Notice> : null}
      <form {...formProps} className="flex flex-col gap-7">
        <input type="hidden" name="mapping" value={JSON.stringify(mapping)} />
        <FormSection title="What it is" about="Stands beside every label, and in releases.">
          <TextField
            label="Name"
            name="name"
            maxLength={120}
            defaultValue={list.name}
            error={error('name')}
            hint="As it is to be read: known as … of this list."
          />
          <div className="grid gap-5 sm:grid-cols-[minmax(0,2fr)_minmax(0,1fr)]">
            <TextField
              label="Source"
              name="source"
              maxLength={300}
              defaultValue={list.source}
              error={error('source')}
              hint="A paper, a survey, a service."
            />
            <TextField
              label="Date"
              name="listDate"
              maxLength={80}
              defaultValue={list.listDate}
              error={error('listDate')}
              hint="Or epoch, or release."
            />
          </div>
        </FormSection>
        <FormSection
          title="Its columns"
          about="Guessed from names, units and values. Look at the rows below before you take it in."
        >
          <ColumnChoices columns={look.columns} mapping={mapping} onChange={setMapping} />
        </FormSection>
        <section className="flex flex-col gap-3 border-t border-line pt-6" aria-busy={isAsking}>
          <h2 className="text-body font-semibold">How it is read</h2>
          <p role="status" className="text-small text-mute">
            {isAsking || !isSame
              ? 'Reading it by the new choice…'
              : look.isWhole
                ? `All ${counted(look.looked, 'row')} were looked at.`
                : `The first ${counted(look.looked, 'row')} were looked at; all are checked when it is taken in.`}
          </p>
          {fault ? <Notice tone="alarm">{fault}</Notice> : null}
          {look.findings.length > 0 ? <FindingList findings={look.findings} /> : null}
          <LookTable look={look} />
        </section>
        <FormSection
          title="How it matches"
          about="By great-circle distance. Choose the radius from the errors of both positions: too wide a one labels neighbours."
        >
          <div className="w-44">
            <TextField
              label="Radius, arcsec"
              name="radiusArcsec"
              inputMode="decimal"
              defaultValue={list.radiusArcsec}
              error={error('radiusArcsec')}
            />
          </div>
          <label className="flex min-h-7 items-start gap-2.5">
            <input
              type="checkbox"
              name="keepsOutOfNew"
              defaultChecked={list.keepsOutOfNew}
              className="mt-1 size-4 accent-lamp"
            />
            <span>
              Keep what it knows out of new lists
              <span className="block text-note text-mute">
                For lists of known lenses. Without it, what is known is labelled and still counts as new.
              </span>
            </span>
          </label>
        </FormSection>
        {isFixed ? null : (
          <div className="flex flex-col items-start gap-3 border-t border-line pt-6">
            {stops && changesColumns ? (
              <label className="flex min-h-7 items-start gap-2.5">
                <input
                  type="checkbox"
                  checked={mapping.allTheSame}
                  onChange={(event) => setMapping({ ...mapping, allTheSame: event.target.checked })}
                  className="mt-1 size-4 accent-lamp"
                />
                <span>
                  Take it in all the same
                  <span className="block text-note text-mute">
                    Rows without a usable position are kept and match nothing.
                  </span>
                </span>
              </label>
            ) : null}
            <FormNote state={state} />
            <Button tone="lamp" type="submit" disabled={pending || (changesColumns && !isSame)}>
              {changesColumns ? (isReady ? 'Read it again by these columns' : 'Take it in') : 'Save'}
            </Button>
          </div>
        )}
      </form>
    </div>
  )
}
