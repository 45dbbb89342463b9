'use client'

import { ArrowDown, ArrowUp } from 'lucide-react'
import { Popover } from 'radix-ui'
import type { TableColumn } from './table-column'
import { shownByDefault, type TableShape } from './table-state'
import { ToolButton } from './tool-button'

interface ColumnChooserProps<Row> {
  shape: TableShape
  columns: readonly TableColumn<Row>[]
  shown: readonly string[]
  onChange: (ids: string[]) => void
}

/** Which columns the table shows, and in which order: the shown ones first, as they stand, then the rest. */
export function ColumnChooser<Row>({ shape, columns, shown, onChange }: ColumnChooserProps<Row>) {
  const free = columns.filter((column) => !column.pinned && !column.filterOnly)
  const byId = new Map(free.map((column) => [column.id, column]))
  const listed = [...shown.flatMap((id) => byId.get(id) ?? []), ...free.filter(({ id }) => !shown.includes(id))]
  const toggle = (id: string) => onChange(shown.includes(id) ? shown.filter((one) => one !== id) : [...shown, id])
  const move = (id: string, step: -1 | 1) => {
    const next = [...shown]
    const at = next.indexOf(id)
    next.splice(at, 1)
    next.splice(at + step, 0, id)
    onChange(next)
  }
  return (
    <Popover.Root>
      <Popover.Trigger asChild>
        <ToolButton>Columns</ToolButton>
      </Popover.Trigger>
      <Popover.Portal>
        <Popover.Content
          align="end"
          sideOffset={6}
          collisionPadding={8}
          aria-label="Columns of the table"
          className="z-40 max-h-[70dvh] overflow-y-auto rounded-control border border-edge/60 bg-raise p-2 shadow-xl"
        >
          <ul>
            {listed.map((column) => {
              const at = shown.indexOf(column.id)
              const title = column.title ?? column.label
              return (
                <li key={column.id} className="flex items-center gap-1">
                  <label className="flex min-h-8 flex-1 cursor-pointer items-center gap-2.5 rounded-key px-2 text-small hover:bg-page max-md:min-h-11">
                    <input
                      type="checkbox"
                      checked={at >= 0}
                      onChange={() => toggle(column.id)}
                      className="size-4 accent-current"
                    />
                    {title}
                  </label>
                  {at >= 0 ? (
                    <>
                      <MoveButton up what={title} disabled={at === 0} onClick={() => move(column.id, -1)} />
                      <MoveButton what={title} disabled={at === shown.length - 1} onClick={() => move(column.id, 1)} />
                    </>
                  ) : null}
                </li>
              )
            })}
          </ul>
          <ToolButton className="mt-1 w-full justify-center" onClick={() => onChange(shownByDefault(shape))}>
            As the table comes
          </ToolButton>
        </Popover.Content>
      </Popover.Portal>
    </Popover.Root>
  )
}

interface MoveButtonProps {
  up?: boolean
  what: string
  disabled: boolean
  onClick: () => void
}

/** Keeps the focus at an end of the list, so that the keyboard does not lose its place. */
function MoveButton({ up = false, what, disabled, onClick }: MoveButtonProps) {
  const Arrow = up ? ArrowUp : ArrowDown
  return (
    <button
      type="button"
      aria-label={`Move ${what} ${up ? 'before the column before it' : 'behind the column behind it'}`}
      aria-disabled={disabled}
      onClick={() => (disabled ? undefined : onClick())}
      className="grid size-7 place-items-center rounded-key text-mute hover:text-text aria-disabled:opacity-30 max-md:size-11"
    >
      <Arrow size={13} aria-hidden="true" />
    </button>
  )
}
