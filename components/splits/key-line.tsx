import { Fragment } from 'react'
import { KeyCap } from '@/components/ui/key-cap'
import { SPLIT_KEYS } from './split-keys'

/** What the keys do, and the switch that turns single keys off (WCAG 2.2, 2.1.4). */
export function KeyLine({
  on,
  onSwitch,
  keys: table = SPLIT_KEYS,
}: {
  on: boolean
  onSwitch: (on: boolean) => void
  keys?: { keys: string[]; does: string }[]
}) {
  return (
    <div className="hidden flex-wrap items-center gap-x-4 gap-y-1 border-t border-line px-5 py-2 text-note text-mute lg:flex">
      {on
        ? table.map(({ keys, does }) => (
            <span key={does} className="inline-flex items-center gap-1 whitespace-nowrap">
              {keys.map((key) => (
                <Fragment key={key}>{key === '…' ? '…' : <KeyCap>{key}</KeyCap>}</Fragment>
              ))}
              {does}
            </span>
          ))
        : null}
      <label className="ml-auto inline-flex min-h-6 items-center gap-1.5">
        <input type="checkbox" checked={on} onChange={(event) => onSwitch(event.target.checked)} />
        Single keys
      </label>
    </div>
  )
}
