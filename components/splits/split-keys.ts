import { CHOICES } from '@/components/evidence/ruling-choices'
import type { RulingChoice } from '@/lib/work/rulings/ruling-input'

export type SplitCommand =
  | { do: 'move'; step: 1 | -1 }
  | { do: 'view'; index: number }
  | { do: 'next view'; step: 1 | -1 }
  | { do: 'choose'; choice: RulingChoice }
  | { do: 'reason' }

interface Pressed {
  key: string
  code: string
  ctrlKey: boolean
  altKey: boolean
  metaKey: boolean
  shiftKey: boolean
  isComposing: boolean
}

/** What a single key means on the splits page; null with a modifier. The caller leaves out keys pressed while typing. */
export function splitCommand(event: Pressed): SplitCommand | null {
  if (event.isComposing || event.ctrlKey || event.altKey || event.metaKey || event.shiftKey) return null
  const digit = /^[1-9]$/.exec(event.key)?.[0] ?? /^Digit([1-9])$/.exec(event.code)?.[1]
  if (digit) return { do: 'view', index: Number(digit) - 1 }
  const key = event.key.toUpperCase()
  if (key === 'J') return { do: 'move', step: 1 }
  if (key === 'K') return { do: 'move', step: -1 }
  if (key === 'ARROWRIGHT') return { do: 'next view', step: 1 }
  if (key === 'ARROWLEFT') return { do: 'next view', step: -1 }
  if (key === 'R') return { do: 'reason' }
  const chosen = CHOICES.find((one) => one.key === key)
  return chosen ? { do: 'choose', choice: chosen.choice } : null
}

/** For the help line. */
export const SPLIT_KEYS: { keys: string[]; does: string }[] = [
  { keys: ['J', 'K'], does: 'next, previous' },
  { keys: ['1', '…', '9'], does: 'view' },
  { keys: ['F'], does: 'close field' },
  { keys: ['L'], does: 'light' },
  { keys: ['X'], does: 'hold to blink' },
  { keys: ['+', '-', '0'], does: 'zoom, reset' },
  { keys: ['A', 'B', 'C', 'N', 'O'], does: 'choose' },
  { keys: ['R'], does: 'reason' },
  { keys: ['Ctrl', 'Enter'], does: 'rule' },
]
