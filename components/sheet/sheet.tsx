'use client'

import { ArrowLeft } from 'lucide-react'
import Link from 'next/link'
import { useCallback, useEffect, useEffectEvent, useRef, useState } from 'react'
import { useKeySwitch } from '@/components/bench/use-key-switch'
import { counted } from '@/components/campaigns/in-words'
import { ButtonLink } from '@/components/ui/button'
import { KeyNames } from '@/components/ui/key-names'
import { Notice } from '@/components/ui/notice'
import type { LentSheet } from '@/lib/work/sheet/lend-sheet'
import type { PassersProgress } from '@/lib/work/sheet/sheet-progress'
import { SheetFoot } from './sheet-foot'
import { SheetGrid } from './sheet-grid'
import { placeAfter, sheetCommandOf, type SheetCommand } from './sheet-keys'
import { SheetPeek } from './sheet-peek'
import { pageOf, restOf, unseenOf } from './sheet-session'
import { useSheet } from './use-sheet'

const many = (count: number) => count.toLocaleString('en')

/** The whole window, always night: a page of small stamps, of which a few are sent on and the rest is dropped in one go. */
export function Sheet({
  slug,
  campaignName,
  personId,
  first,
}: {
  slug: string
  campaignName: string
  personId: number
  first: LentSheet & { progress: PassersProgress }
}) {
  const { session, progress, outbox, seen, exhausted, trouble, run } = useSheet({ slug, personId }, first)
  const [keysOn, setKeysOn] = useKeySwitch(personId)
  const [view, setView] = useState(0)
  const grid = useRef<HTMLUListElement>(null)
  const page = pageOf(session)
  const rest = restOf(session, seen.seen).length
  const unseen = unseenOf(session, seen.seen).length
  const stamp = page[session.at]
  const lastDone = session.done.at(-1)
  const keyName = useCallback((key: string) => (keysOn || key === 'Esc' ? key : null), [keysOn])

  const focusStamp = (place: number) =>
    // A dialog that closes gives the focus back first.
    setTimeout(() => grid.current?.querySelectorAll<HTMLButtonElement>('[aria-pressed]')[place]?.focus(), 0)
  const focusAt = (place: number) => {
    run({ do: 'go', to: place })
    if (!session.enlarged) focusStamp(place)
  }
  const obey = (command: SheetCommand) => {
    if (command.do === 'move') {
      focusAt(placeAfter(session.at, command.by, { count: page.length, columns: columnsOf(grid.current) }))
    } else if (command.do === 'send') run({ do: 'toggle', at: session.at })
    else if (command.do === 'enlarge') run({ do: 'enlarge', on: !session.enlarged })
    else if (command.do === 'view') setView(command.index)
    else if (command.do === 'undo') run({ do: 'undo' })
    else if (command.do === 'close') run({ do: 'confirm', on: false })
    else if (!session.enlarged) run(rest === 0 || session.confirming ? { do: 'finish' } : { do: 'confirm', on: true })
  }
  const pressed = useEffectEvent((event: KeyboardEvent) => {
    if (event.defaultPrevented || event.target instanceof HTMLInputElement) return
    const command = sheetCommandOf(event, keysOn)
    // A dialog closes by itself.
    if (!command || page.length === 0 || (command.do === 'close' && !session.confirming)) {
      if (command?.do === 'undo') run(command)
      return
    }
    event.preventDefault()
    obey(command)
  })
  useEffect(() => {
    const down = (event: KeyboardEvent) => pressed(event)
    window.addEventListener('keydown', down)
    return () => window.removeEventListener('keydown', down)
  }, [])
  // A new page begins at its first stamp, for hands on the keys.
  const pages = session.done.length
  useEffect(() => {
    grid.current?.querySelector<HTMLButtonElement>('[aria-pressed]')?.focus()
    const around = grid.current?.closest('main')
    if (around) around.scrollTop = 0
  }, [pages])

  const sittingSent = session.sent.size
  const sittingDropped = session.done.reduce((sum, { dropped }) => sum + dropped.length, session.droppedBefore)
  return (
    <KeyNames.Provider value={keyName}>
      <div className="night fixed inset-0 flex flex-col bg-bench text-text [color-scheme:dark]">
        <header className="relative flex flex-wrap items-center gap-x-4 px-3 pt-2 md:px-6">
          <div
            role="progressbar"
            aria-label="Passed over"
            aria-valuenow={progress.passedPercent}
            className="absolute inset-x-0 top-0 h-[3px] bg-raise"
          >
            <div className="h-full bg-lamp" style={{ width: `${progress.passedPercent}%` }} />
          </div>
          <Link
            prefetch={false}
            href={`/campaigns/${slug}`}
            aria-label={`Leave the sheet, to ${campaignName}`}
            title="Leave the sheet"
            className="-ml-2 grid size-11 shrink-0 place-items-center rounded-control text-mute hover:text-text md:size-8"
          >
            <ArrowLeft size={18} aria-hidden="true" />
          </Link>
          <h1 className="text-small font-semibold">First pass</h1>
          <p className="text-note text-mute">
            <span className="figures">{many(progress.toCome)}</span> to come;{' '}
            <span className="figures">{many(sittingSent)}</span> sent on and{' '}
            <span className="figures">{many(sittingDropped)}</span> dropped in this sitting
          </p>
          <p role="status" className="text-note text-mute">
            {outbox.waiting > 0 ? `${counted(outbox.waiting, 'mark')} on the way` : ''}
          </p>
        </header>
        <main className="min-h-0 flex-1 overflow-y-auto px-3 py-3 md:px-6">
          {outbox.trouble || (outbox.waiting > 0 && !outbox.kept) ? (
            <div className="mb-3">
              <Notice tone="alarm">
                {outbox.trouble?.sentence}{' '}
                {outbox.waiting > 0 && outbox.kept
                  ? `${counted(outbox.waiting, 'mark')} ${outbox.waiting === 1 ? 'is' : 'are'} kept here and sent again.`
                  : ''}
                {outbox.waiting > 0 && !outbox.kept
                  ? 'This browser keeps nothing for this site: leave this tab open until all marks have arrived.'
                  : ''}
                {outbox.trouble?.signIn ? (
                  <a
                    href={`/signin?next=${encodeURIComponent(`/campaigns/${slug}/sheet`)}`}
                    className="ml-2 underline underline-offset-4"
                  >
                    Sign in and come back here
                  </a>
                ) : null}
              </Notice>
            </div>
          ) : null}
          {outbox.refused ? (
            <div className="mb-3">
              <Notice tone="alarm">A mark was not taken: {outbox.refused}</Notice>
            </div>
          ) : null}
          {page.length > 0 ? (
            <SheetGrid
              stamps={page}
              sent={session.sent}
              at={session.at}
              gridRef={grid}
              seen={seen}
              onToggle={(place) => run({ do: 'toggle', at: place })}
              onFocus={(place) => (place === session.at ? undefined : run({ do: 'go', to: place }))}
              onEnlarge={(place) => {
                run({ do: 'go', to: place })
                run({ do: 'enlarge', on: true })
              }}
            />
          ) : (
            <SheetEnd slug={slug} waiting={progress.toCome} exhausted={exhausted} trouble={trouble} />
          )}
        </main>
        <footer className="border-t border-line px-3 py-2 md:px-6">
          <SheetFoot
            rest={rest}
            unseen={unseen}
            page={page.length}
            confirming={session.confirming}
            lastDropped={lastDone ? lastDone.dropped.length : null}
            onAsk={() => run({ do: 'confirm', on: true })}
            onFinish={() => run({ do: 'finish' })}
            onCancel={() => run({ do: 'confirm', on: false })}
            onUndo={() => run({ do: 'undo' })}
          />
          <label className="flex min-h-6 items-center gap-2 text-note text-mute max-md:hidden">
            <input
              type="checkbox"
              role="switch"
              checked={keysOn}
              onChange={(event) => setKeysOn(event.target.checked)}
              className="size-4 accent-lamp"
            />
            Single keys: arrows move, S sends on, E enlarges, 1 to 9 change the view, N drops the rest, Z brings the
            page back
          </label>
        </footer>
        {session.enlarged && stamp ? (
          <SheetPeek
            stamp={stamp}
            sent={session.sent.has(stamp.id)}
            view={view}
            onView={setView}
            onToggle={() => run({ do: 'toggle', at: session.at })}
            onMove={(by) => obey({ do: 'move', by })}
            onPicture={() => seen.show(stamp.id)}
            onClose={() => {
              run({ do: 'enlarge', on: false })
              focusStamp(session.at)
            }}
          />
        ) : null}
      </div>
    </KeyNames.Provider>
  )
}

function SheetEnd({
  slug,
  waiting,
  exhausted,
  trouble,
}: {
  slug: string
  waiting: number
  exhausted: boolean
  trouble: string | null
}) {
  const [title, about] = trouble
    ? ['The next page has not come', `${trouble} It is asked for again every few seconds.`]
    : !exhausted
      ? ['The next page is coming', 'It has been asked for.']
      : waiting > 0
        ? ['The rest lies on other people’s sheets', 'What they leave comes back here within 20 minutes.']
        : ['The first pass is through', 'What was sent on is at the bench. Candidates that come in later wait here.']
  return (
    <div className="grid h-full place-items-center">
      <div className="flex max-w-md flex-col items-start gap-3">
        <h2 className="text-display font-semibold">{title}</h2>
        <p className="text-mute">{about}</p>
        <ButtonLink href={`/campaigns/${slug}/bench`}>To the bench</ButtonLink>
      </div>
    </div>
  )
}

/** Stamps in a row, as they are laid out now. */
function columnsOf(list: HTMLUListElement | null): number {
  const items = [...(list?.children ?? [])] as HTMLElement[]
  const next = items.findIndex(({ offsetTop }) => offsetTop !== items[0].offsetTop)
  return next > 0 ? next : Math.max(1, items.length)
}
