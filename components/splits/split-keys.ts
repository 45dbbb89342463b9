import { CHOICES } from '@/components/evidence/ruling-choices'
import type { RulingChoice } from '@/lib/work/rulings/ruling-input'

export type SplitCommand =
  | { do: 'move'; step: 1 | -1 }
  | { do: 'view'; index: number }
  | { do: 'next view'; step: 1 | -1 }
  | { do: 'choose'; choice: RulingChoice }
  | { do: 'reason' }
  /** Selects the case or leaves it out; moving with Shift selects on the way. */
  | { do: 'select' }
  | { do: 'select on'; step: 1 | -1 }
  | { do: 'select alike' }
  | { do: 'select none' }

interface Pressed {
  key: string
  code: string
  ctrlKey: boolean
  altKey: boolean
  metaKey: boolean
  shiftKey: boolean
  isComposing: boolean
}

const SHIFTED: Record<string, SplitCommand> = {
  J: { do: 'select on', step: 1 },
  K: { do: 'select on', step: -1 },
  S: { do: 'select alike' },
}

/** What a single key means on the splits page; null with another modifier than Shift. The caller leaves out keys pressed while typing. */
export function splitCommand(event: Pressed): SplitCommand | null {
  if (event.isComposing || event.ctrlKey || event.altKey || event.metaKey) return null
  if (event.shiftKey) return SHIFTED[event.key.toUpperCase()] ?? null
  const digit = /^[1-9]$/.exec(event.key)?.[0] ?? /^Digit([1-9])$/.exec(event.code)?.[1]
  if (digit) return { do: 'view', index: Number(digit) - 1 }
  const key = event.key.toUpperCase()
  if (key === 'J') return { do: 'move', step: 1 }
  if (key === 'K') return { do: 'move', step: -1 }
  if (key === 'ARROWRIGHT') return { do: 'next view', step: 1 }
  if (key === 'ARROWLEFT') return { do: 'next view', step: -1 }
  if (key === 'R') return { do: 'reason' }
  if (key === 'S') return { do: 'select' }
  if (key === 'ESCAPE') return { do: 'select none' }
  const chosen = CHOICES.find((one) => one.key === key)
  return chosen ? { do: 'choose', choice: chosen.choice } : null
}

/** For the help line. */
export const SPLIT_KEYS: { keys: string[]; does: string }[] = [
  { keys: ['J', 'K'], does: 'next, previous' },
  { keys: ['S'], does: 'select; with Shift those alike' },
  { keys: ['1', '…', '9'], does: 'view' },
  { keys: ['F'], does: 'close field' },
  { keys: ['L'], does: 'light' },
  { keys: ['X'], does: 'hold to blink' },
  { keys: ['+', '-', '0'], does: 'zoom, reset' },
  { keys: ['A', 'B', 'C', 'N', 'O'], does: 'choose' },
  { keys: ['R'], does: 'reason' },
  { keys: ['Ctrl', 'Enter'], does: 'rule' },
]
