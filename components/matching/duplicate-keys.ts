export type DuplicateCommand =
  { do: 'move'; step: 1 | -1 } | { do: 'keep'; place: number } | { do: 'same' } | { do: 'different' }

interface Pressed {
  key: string
  code: string
  ctrlKey: boolean
  altKey: boolean
  metaKey: boolean
  shiftKey: boolean
  isComposing: boolean
}

/** What a single key means on the page of duplicates; null with a modifier. The caller leaves out keys pressed while typing. */
export function duplicateCommand(event: Pressed): DuplicateCommand | null {
  if (event.isComposing || event.ctrlKey || event.altKey || event.metaKey || event.shiftKey) return null
  const digit = /^[1-9]$/.exec(event.key)?.[0] ?? /^Digit([1-9])$/.exec(event.code)?.[1]
  if (digit) return { do: 'keep', place: Number(digit) - 1 }
  const key = event.key.toUpperCase()
  if (key === 'J') return { do: 'move', step: 1 }
  if (key === 'K') return { do: 'move', step: -1 }
  if (key === 'M') return { do: 'same' }
  return key === 'D' ? { do: 'different' } : null
}

/** For the line of keys. */
export const DUPLICATE_KEYS: { keys: string[]; does: string }[] = [
  { keys: ['J', 'K'], does: 'next, previous' },
  { keys: ['1', '…', '9'], does: 'which one is kept' },
  { keys: ['M'], does: 'merge: reason' },
  { keys: ['D'], does: 'different: reason' },
  { keys: ['Ctrl', 'Enter'], does: 'do it' },
]
