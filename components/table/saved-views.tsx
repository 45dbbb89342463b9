'use client'

import Link from 'next/link'
import { usePathname } from 'next/navigation'
import { Popover } from 'radix-ui'
import { useActionState, useId, useState } from 'react'
import type { FormState } from '@/components/ui/form-state'
import { TextButton } from '@/components/ui/text-button'
import type { SavedViewShown } from '@/lib/work/catalogue/saved-views'
import { ToolButton } from './tool-button'

type ViewAction = (state: FormState, form: FormData) => Promise<FormState>

export interface ViewsOfTable {
  own: readonly SavedViewShown[]
  /** Of leads, for everybody. */
  shared: readonly SavedViewShown[]
  mayShare: boolean
  save: ViewAction
  change: ViewAction
  remove: ViewAction
}

interface SavedViewsProps extends ViewsOfTable {
  /** The table as it is now. */
  query: string
  /** A query as this table writes it. */
  normalised: (query: string) => string
}

/** Views that somebody has saved: a link each, with what can be done with one's own, and the table as it is now to be saved. */
export function SavedViews({ own, shared, mayShare, save, change, remove, query, normalised }: SavedViewsProps) {
  const path = usePathname()
  const [open, setOpen] = useState(false)
  const isCurrent = (view: SavedViewShown) => normalised(view.query) === query
  const current = [...own, ...shared].find(isCurrent)
  const close = () => setOpen(false)
  const link = (view: SavedViewShown) => (
    <Link
      href={view.query ? `${path}?${view.query}` : path}
      aria-current={isCurrent(view) ? 'true' : undefined}
      onClick={close}
      className="flex min-h-8 min-w-0 flex-1 items-center rounded-key px-2 text-small hover:bg-page aria-[current]:font-semibold aria-[current]:text-lamp max-md:min-h-11"
    >
      <span className="truncate">{view.name}</span>
    </Link>
  )
  return (
    <Popover.Root open={open} onOpenChange={setOpen}>
      <Popover.Trigger asChild>
        <ToolButton>
          <span className="max-w-40 truncate">{current ? `View: ${current.name}` : 'Views'}</span>
        </ToolButton>
      </Popover.Trigger>
      <Popover.Portal>
        <Popover.Content
          align="end"
          sideOffset={6}
          collisionPadding={8}
          aria-label="Saved views"
          className="z-40 flex max-h-[75dvh] w-80 max-w-[calc(100vw-16px)] flex-col gap-3 overflow-y-auto rounded-control border border-edge/60 bg-raise p-3 shadow-xl"
        >
          {own.length > 0 ? (
            <ul aria-label="Own views">
              {own.map((view) => (
                <OwnView key={view.id} view={view} mayShare={mayShare} change={change} remove={remove}>
                  {link(view)}
                </OwnView>
              ))}
            </ul>
          ) : null}
          {shared.length > 0 ? (
            <section>
              <h2 className="px-2 text-note text-mute">Shared by leads</h2>
              <ul>
                {shared.map((view) => (
                  <li key={view.id} className="flex items-center gap-2">
                    {link(view)}
                    <span className="shrink-0 pr-2 text-note text-mute">{view.by}</span>
                  </li>
                ))}
              </ul>
            </section>
          ) : null}
          {own.length + shared.length === 0 ? (
            <p className="text-small text-mute">
              A view keeps filters, order and columns under a name. Set the table as you like it, then save it here.
            </p>
          ) : null}
          <SaveView query={query} mayShare={mayShare} save={save} />
        </Popover.Content>
      </Popover.Portal>
    </Popover.Root>
  )
}

const BOX =
  'min-h-8 w-full min-w-0 rounded-key border border-edge/60 bg-well px-2 text-small text-text aria-invalid:border-alarm max-md:min-h-11'

function SaveView({ query, mayShare, save }: Pick<SavedViewsProps, 'query' | 'mayShare' | 'save'>) {
  const id = useId()
  const [state, action, pending] = useActionState(save, {})
  const problem = state.errors?.name ?? state.message
  return (
    <form action={action} className="flex flex-col gap-2 border-t border-line pt-3">
      <label htmlFor={id} className="text-note text-mute">
        Save the table as it is now under the name
      </label>
      <input type="hidden" name="query" value={query} />
      <div className="flex gap-2">
        <input
          id={id}
          name="name"
          maxLength={60}
          autoComplete="off"
          key={state.done ?? 'name'}
          defaultValue={state.values?.name ?? ''}
          aria-invalid={problem ? true : undefined}
          aria-describedby={problem ? `${id}-problem` : undefined}
          className={BOX}
        />
        <ToolButton type="submit" disabled={pending} className="shrink-0 text-text">
          Save view
        </ToolButton>
      </div>
      {mayShare ? (
        <label className="flex min-h-6 items-center gap-2 text-small max-md:min-h-11">
          <input type="checkbox" name="shared" className="size-4 accent-current" />
          Share it with the campaign
        </label>
      ) : null}
      {problem ? (
        <p id={`${id}-problem`} role="alert" className="text-note text-alarm">
          {problem}
        </p>
      ) : state.done ? (
        <p role="status" className="text-note text-mute">
          {state.done}
        </p>
      ) : null}
    </form>
  )
}

interface OwnViewProps extends Pick<SavedViewsProps, 'mayShare' | 'change' | 'remove'> {
  view: SavedViewShown
  children: React.ReactNode
}

function OwnView({ view, mayShare, change, remove, children }: OwnViewProps) {
  const [open, setOpen] = useState(false)
  const [changed, changeAction, changing] = useActionState(async (before: FormState, form: FormData) => {
    const after = await change(before, form)
    if (after.done) setOpen(false)
    return after
  }, {})
  const [removed, removeAction, removing] = useActionState(remove, {})
  const id = useId()
  const problem = changed.errors?.name ?? changed.message ?? removed.message
  return (
    <li>
      <div className="flex items-center gap-2">
        {children}
        {view.shared ? <span className="text-note text-mute">shared</span> : null}
        <TextButton
          aria-expanded={open}
          aria-label={`Change the view ${view.name}`}
          className="px-1 max-md:min-h-11"
          onClick={() => setOpen(!open)}
        >
          Change
        </TextButton>
      </div>
      {open ? (
        <div className="mb-2 flex flex-col gap-2 rounded-key bg-page p-2">
          <form action={changeAction} className="flex flex-col gap-2">
            <input type="hidden" name="id" value={view.id} />
            <label htmlFor={id} className="text-note text-mute">
              Name
            </label>
            <div className="flex gap-2">
              <input
                id={id}
                name="name"
                maxLength={60}
                autoComplete="off"
                defaultValue={changed.values?.name ?? view.name}
                aria-invalid={problem ? true : undefined}
                aria-describedby={problem ? `${id}-problem` : undefined}
                className={BOX}
              />
              <ToolButton type="submit" disabled={changing} className="shrink-0 text-text">
                Keep
              </ToolButton>
            </div>
            {mayShare ? (
              <label className="flex min-h-6 items-center gap-2 text-small max-md:min-h-11">
                <input type="checkbox" name="shared" defaultChecked={view.shared} className="size-4 accent-current" />
                Shared with the campaign
              </label>
            ) : null}
          </form>
          <form action={removeAction}>
            <input type="hidden" name="id" value={view.id} />
            <TextButton type="submit" disabled={removing} className="max-md:min-h-11">
              Delete this view
            </TextButton>
          </form>
          {problem ? (
            <p id={`${id}-problem`} role="alert" className="text-note text-alarm">
              {problem}
            </p>
          ) : null}
        </div>
      ) : null}
    </li>
  )
}
