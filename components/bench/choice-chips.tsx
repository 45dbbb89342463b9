import { CHOICE_KEYS } from './bench-keys'
import { letGo } from './let-go'

/** Chips to pick from with the pointer at any time and with digits while `open`, when each shows its key. */
export function ChoiceChips<T extends string>({
  choices,
  picked,
  open,
  onPick,
}: {
  choices: readonly T[]
  picked: readonly T[]
  open: boolean
  onPick: (choice: T) => void
}) {
  return choices.map((choice, index) => {
    const on = picked.includes(choice)
    return (
      <button
        key={choice}
        type="button"
        aria-pressed={on}
        aria-keyshortcuts={open ? CHOICE_KEYS[index] : undefined}
        onClick={letGo(() => onPick(choice))}
        className={`inline-flex min-h-11 touch-manipulation items-center gap-1.5 whitespace-nowrap rounded-full border px-3 text-small md:min-h-7 short:min-h-11 md:px-2.5 md:text-note ${
          on ? 'border-lamp bg-lamp/12 text-text' : 'border-line text-mute hover:border-edge hover:text-text'
        }`}
      >
        {open ? (
          <kbd aria-hidden="true" className="figures hidden text-[0.6875rem] font-semibold text-lamp md:inline">
            {CHOICE_KEYS[index]}
          </kbd>
        ) : null}
        {choice}
      </button>
    )
  })
}
