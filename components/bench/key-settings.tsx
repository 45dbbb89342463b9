'use client'

import { useState } from 'react'
import { Button } from '@/components/ui/button'
import { BenchDialog } from './bench-dialog'
import { KEY_ACTIONS, keyOf } from './key-choice'
import { KeySwitch } from './key-switch'
import type { Keys } from './use-keys'

const WAITING_FOR: readonly string[] = ['Shift', 'Control', 'Alt', 'AltGraph', 'Meta', 'CapsLock', 'Dead']

/** Another key for each action, or none at all. */
export function KeySettings({ keys, onClose }: { keys: Keys; onClose: () => void }) {
  const [asking, setAsking] = useState<string | null>(null)
  const [said, setSaid] = useState<{ action: string; sentence: string } | null>(null)

  function press(action: string, event: React.KeyboardEvent): void {
    if (asking !== action || event.ctrlKey || event.metaKey || event.altKey || WAITING_FOR.includes(event.key)) return
    // Tab goes on to the next action.
    if (event.key === 'Tab') return setAsking(null)
    if (event.key === 'Escape') return
    event.preventDefault()
    event.stopPropagation()
    const refused = keys.change(action, event.key)
    setSaid(refused ? { action, sentence: refused } : null)
    if (!refused) setAsking(null)
  }

  /** Esc gives up the choice first, and closes the sheet only then. */
  function giveUp(event: KeyboardEvent): void {
    if (asking === null) return
    event.preventDefault()
    setAsking(null)
  }

  return (
    <BenchDialog title="Your keys" onClose={onClose} onEscape={giveUp}>
      <div className="mt-4">
        <KeySwitch keys={keys} />
      </div>
      <p className="mt-3 text-note text-mute">
        Choose an action, then press the key that you want for it. 1 to 9 show the views, Space blinks, the arrows
        change the view, ? opens the help; these stay.
      </p>
      <ul className="mt-3 grid gap-x-6 sm:grid-cols-2">
        {KEY_ACTIONS.map(({ key: action, does }) => {
          const own = keyOf(keys.choice, action)
          const open = asking === action
          return (
            <li key={action} className="border-t border-line">
              <button
                type="button"
                aria-pressed={open}
                aria-label={`${does}: ${own}${open ? ', press a key' : ''}`}
                aria-describedby={said?.action === action ? 'key-said' : undefined}
                onClick={() => {
                  setSaid(null)
                  setAsking(open ? null : action)
                }}
                onBlur={() => setAsking(null)}
                onKeyDown={(event) => press(action, event)}
                className="flex min-h-11 w-full items-center justify-between gap-3 text-left text-small hover:text-text md:min-h-9"
              >
                <span className={own === action ? 'text-mute' : 'text-text'}>{does}</span>
                <kbd
                  className={`figures min-w-8 rounded-key border px-2 text-center text-note font-semibold ${
                    open ? 'border-lamp text-lamp' : 'border-edge/60 text-text'
                  }`}
                >
                  {open ? 'press' : own}
                </kbd>
              </button>
              {said?.action === action ? (
                <p id="key-said" role="alert" className="pb-2 text-note text-alarm">
                  {said.sentence}
                </p>
              ) : null}
            </li>
          )
        })}
      </ul>
      <div className="mt-4 flex flex-wrap gap-3">
        <Button className="min-h-11" onClick={onClose}>
          Back to the bench
        </Button>
        <Button
          className="min-h-11"
          onClick={() => {
            keys.reset()
            setSaid(null)
          }}
        >
          All keys as they come
        </Button>
      </div>
    </BenchDialog>
  )
}
