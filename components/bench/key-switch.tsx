import type { Keys } from './use-keys'

export function KeySwitch({ keys }: { keys: Keys }) {
  return (
    <label className="flex min-h-11 items-center gap-3 text-small">
      <input
        type="checkbox"
        role="switch"
        checked={keys.on}
        onChange={(event) => keys.setOn(event.target.checked)}
        className="size-5 shrink-0 accent-lamp"
      />
      <span>
        Single-key shortcuts
        <span className="block text-note text-mute">
          Turn them off if you speak to your computer or keys get pressed by accident. Remembered in this browser.
        </span>
      </span>
    </label>
  )
}
