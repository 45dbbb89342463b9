/** What a key means on the sheet. Letters hold only while single keys are on; arrows always. */
export type SheetCommand =
  | { do: 'move'; by: 'left' | 'right' | 'up' | 'down' | 'first' | 'last' }
  | { do: 'send' }
  | { do: 'enlarge' }
  | { do: 'rest' }
  | { do: 'undo' }
  | { do: 'close' }
  | { do: 'view'; index: number }

const ARROWS: Record<string, SheetCommand> = {
  ArrowLeft: { do: 'move', by: 'left' },
  ArrowRight: { do: 'move', by: 'right' },
  ArrowUp: { do: 'move', by: 'up' },
  ArrowDown: { do: 'move', by: 'down' },
  Home: { do: 'move', by: 'first' },
  End: { do: 'move', by: 'last' },
  Escape: { do: 'close' },
}

const LETTERS: Record<string, SheetCommand> = {
  s: { do: 'send' },
  e: { do: 'enlarge' },
  n: { do: 'rest' },
  z: { do: 'undo' },
}

export function sheetCommandOf(
  { key, ctrlKey, altKey, metaKey, repeat }: Pick<KeyboardEvent, 'key' | 'ctrlKey' | 'altKey' | 'metaKey' | 'repeat'>,
  singleKeys: boolean,
): SheetCommand | null {
  if (ctrlKey || altKey || metaKey) return null
  if (ARROWS[key]) return ARROWS[key]
  if (!singleKeys || repeat) return null
  if (/^[1-9]$/.test(key)) return { do: 'view', index: Number(key) - 1 }
  return LETTERS[key.toLowerCase()] ?? null
}

/** Where a move leads among `count` places in rows of `columns`. */
export function placeAfter(
  at: number,
  by: Extract<SheetCommand, { do: 'move' }>['by'],
  { count, columns }: { count: number; columns: number },
): number {
  const to = { left: at - 1, right: at + 1, up: at - columns, down: at + columns, first: 0, last: count - 1 }[by]
  return to < 0 || to >= count ? at : to
}
