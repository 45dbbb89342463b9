'use client'

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

/** Which columns the table shows. */
export function ColumnChooser<Row>({ shape, columns, shown, onChange }: ColumnChooserProps<Row>) {
  const free = columns.filter((column) => !column.pinned)
  const toggle = (id: string) =>
    onChange(free.filter((column) => (column.id === id) !== shown.includes(column.id)).map((column) => column.id))
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
            {free.map((column) => (
              <li key={column.id}>
                <label className="flex min-h-8 cursor-pointer items-center gap-2.5 rounded-key px-2 text-small hover:bg-page">
                  <input
                    type="checkbox"
                    checked={shown.includes(column.id)}
                    onChange={() => toggle(column.id)}
                    className="size-4 accent-current"
                  />
                  {column.title ?? column.label}
                </label>
              </li>
            ))}
          </ul>
          <ToolButton className="mt-1 w-full justify-center" onClick={() => onChange(shownByDefault(shape))}>
            As the table comes
          </ToolButton>
        </Popover.Content>
      </Popover.Portal>
    </Popover.Root>
  )
}
