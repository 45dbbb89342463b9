'use client'

import { Button } from '@/components/ui/button'
import { KeyCap } from '@/components/ui/key-cap'
import { KeyNames } from '@/components/ui/key-names'
import { BenchDialog } from './bench-dialog'
import { KEY_TABLE } from './bench-keys'
import { keyOf } from './key-choice'
import { KeySwitch } from './key-switch'
import type { Keys } from './use-keys'

/** All keys, the person's own, and the way to change them or turn them off. */
export function HelpOverlay({ keys, onClose, onChange }: { keys: Keys; onClose: () => void; onChange: () => void }) {
  return (
    <BenchDialog title="Keys at the bench" onClose={onClose}>
      <p className="mt-2 text-note text-mute">
        Held on the stamp, a mouse or a finger blinks too; swept sideways, it changes the view. Neither ever grades.
      </p>
      <KeyNames.Provider value={(key) => keyOf(keys.choice, key)}>
        <dl className="mt-4 grid grid-cols-[auto_1fr] items-baseline gap-x-5 gap-y-2 text-small">
          {KEY_TABLE.map(({ keys: names, does }) => (
            <div key={does} className="contents">
              <dt className="flex gap-1">
                {names.map((key) => (key === '…' ? <span key={key}>…</span> : <KeyCap key={key}>{key}</KeyCap>))}
              </dt>
              <dd className="text-mute">{does}</dd>
            </div>
          ))}
        </dl>
      </KeyNames.Provider>
      <div className="mt-4 border-t border-line pt-4">
        <KeySwitch keys={keys} />
      </div>
      <div className="mt-4 flex flex-wrap gap-3">
        <Button className="min-h-11" onClick={onClose}>
          Back to the bench
        </Button>
        <Button className="min-h-11" onClick={onChange}>
          Change the keys
        </Button>
      </div>
    </BenchDialog>
  )
}
