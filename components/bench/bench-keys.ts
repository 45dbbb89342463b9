/** What a key means at the bench. Single keys only, never with a modifier, never while typing. */
import { LIGHT_KEYS, lightCommandOf, type LightCommand } from '@/components/light/light-keys'
import type { GradeLetter } from '@/db/schema/grading'
import { translateKey, type KeyChoice } from './key-choice'

export type Command =
  | { do: 'grade'; letter: GradeLetter }
  | { do: 'view'; index: number }
  | { do: 'next view'; step: 1 | -1 }
  | { do: 'choose'; index: number }
  | { do: 'tags' }
  | { do: 'reasons' }
  | { do: 'close' }
  | { do: 'remark' }
  | { do: 'undo' }
  | { do: 'keep' }
  | { do: 'blink' }
  | { do: 'help' }
  | { do: 'settings' }
  | { do: 'rest' }
  | { do: 'measure'; tool: 'ruler' | 'circle' }
  | { do: 'light'; light: LightCommand }

/** While a chooser is open digits pick from it; letters mean what they always mean, so no grade goes astray. */
export type Chooser = 'tags' | 'reasons' | null

/** Keys of the choices in a chooser, in order. */
export const CHOICE_KEYS = ['1', '2', '3', '4', '5', '6', '7', '8', '9', '0', 'F'] as const

const LETTERS: Record<string, Command> = {
  a: { do: 'grade', letter: 'A' },
  b: { do: 'grade', letter: 'B' },
  c: { do: 'grade', letter: 'C' },
  n: { do: 'grade', letter: 'N' },
  u: { do: 'grade', letter: 'U' },
  t: { do: 'tags' },
  w: { do: 'reasons' },
  m: { do: 'remark' },
  z: { do: 'undo' },
  k: { do: 'keep' },
  x: { do: 'blink' },
  h: { do: 'help' },
  ',': { do: 'settings' },
  e: { do: 'rest' },
  r: { do: 'measure', tool: 'ruler' },
  o: { do: 'measure', tool: 'circle' },
  '?': { do: 'help' },
  ' ': { do: 'blink' },
  arrowleft: { do: 'next view', step: -1 },
  arrowright: { do: 'next view', step: 1 },
}

interface Pressed {
  key: string
  code: string
  repeat: boolean
  ctrlKey: boolean
  altKey: boolean
  metaKey: boolean
  shiftKey: boolean
  isComposing: boolean
}

/** What has the focus: a text field takes every key; a button takes Space and Enter for itself, a slider its arrows. */
export type FocusKind = 'text' | 'control' | 'slider' | 'page'

/** Keys that a focused slider takes for itself. */
export const SLIDER_KEYS: readonly string[] = [
  'ArrowLeft',
  'ArrowRight',
  'ArrowUp',
  'ArrowDown',
  'Home',
  'End',
  'PageUp',
  'PageDown',
]

/**
 * Marks a button to which the focus came back by itself, from a field that closed: Space means what it means on the page, for
 * the person did not go to the button. Enter still presses it.
 */
export const RETURNED_FOCUS = 'data-returned-focus'

export function focusKind(target: EventTarget | null): FocusKind {
  if (!(target instanceof Element)) return 'page'
  if (target.closest('input[type="range"]')) return 'slider'
  if (target.closest('input[type="checkbox"]')) return 'control'
  if (target.closest('input, textarea, select, [contenteditable]:not([contenteditable="false"])')) return 'text'
  if (target.hasAttribute(RETURNED_FOCUS)) return 'page'
  return target.closest('button, a[href], summary, [role="button"]') ? 'control' : 'page'
}

/** Layouts that put digits on the shifted row still have the key in that place. */
function digitOf({ key, code }: Pressed): string | null {
  return /^\d$/.test(key) ? key : (/^Digit(\d)$/.exec(code)?.[1] ?? null)
}

/** What is pressed, as the key that its action comes with; null for a key that was taken away from its action. */
function translated(event: Pressed, choice: KeyChoice): Pressed | null {
  const key = translateKey(choice, event.key)
  if (key === null) return null
  if (key === event.key) return event
  // A sign may need Shift on this layout, and the place of a key no longer tells what it means.
  return { ...event, key, code: '', shiftKey: event.shiftKey && /^\p{L}$/u.test(event.key) }
}

function choiceOf(event: Pressed, focus: FocusKind, choice: KeyChoice): Command | null {
  // A letter that the person has made the key of something else means that.
  if (/^\p{L}$/u.test(event.key) && translateKey(choice, event.key) !== event.key) return null
  if (event.repeat || event.ctrlKey || event.altKey || event.metaKey || event.shiftKey || focus === 'text') return null
  const index = CHOICE_KEYS.indexOf((digitOf(event) ?? event.key.toUpperCase()) as (typeof CHOICE_KEYS)[number])
  return index >= 0 ? { do: 'choose', index } : null
}

export function commandOf(
  pressed: Pressed,
  focus: FocusKind,
  chooser: Chooser,
  choice: KeyChoice = {},
): Command | null {
  if (focus === 'text' || pressed.isComposing) return null
  if (focus === 'slider' && SLIDER_KEYS.includes(pressed.key)) return null
  const picked = chooser ? choiceOf(pressed, focus, choice) : null
  if (picked) return picked
  const event = translated(pressed, choice)
  if (!event) return null
  const light = lightCommandOf(event)
  if (light) return { do: 'light', light }
  if (event.repeat) return null
  if (event.ctrlKey || event.altKey || event.metaKey || (event.shiftKey && event.key !== '?')) return null
  if (focus === 'control' && (event.key === ' ' || event.key === 'Enter')) return null
  if (event.key === 'Escape' || event.key === 'Enter') return chooser ? { do: 'close' } : null
  const digit = digitOf(event)
  if (digit) return digit === '0' ? null : { do: 'view', index: Number(digit) - 1 }
  return LETTERS[event.key.toLowerCase()] ?? null
}

/** Whether letting go of this key ends the blinking. */
export const endsBlink = (key: string, choice: KeyChoice): boolean =>
  key === ' ' || translateKey(choice, key)?.toLowerCase() === 'x'

/** For the help overlay: every key and what it does. */
export const KEY_TABLE: { keys: string[]; does: string }[] = [
  { keys: ['A', 'B', 'C', 'N'], does: 'grade: sure, probable, possible, not a lens' },
  { keys: ['U'], does: 'cannot judge this picture' },
  { keys: ['W'], does: 'say why it could not be judged, just after U' },
  { keys: ['1', '…', '9'], does: 'show that view' },
  { keys: ['←', '→'], does: 'view before, view after' },
  { keys: ['Space', 'X'], does: 'hold to blink against the view before' },
  { keys: ['T'], does: 'tags: then 1 to 9, 0 and F pick; a grade or Enter closes' },
  { keys: ['M'], does: 'remark: Enter or Esc closes it, Shift+Enter starts a line' },
  { keys: ['Z'], does: 'undo: back to the one graded last, then further' },
  { keys: ['K'], does: 'keep the grade you look back at, and return' },
  { keys: ['R', 'O'], does: 'ruler, circle: arrows move, Shift by ten pixels, Enter takes the other end, Esc leaves' },
  ...LIGHT_KEYS,
  { keys: ['E'], does: 'end the sitting: what you did, and a way back' },
  { keys: [','], does: 'change these keys' },
  { keys: ['H', '?'], does: 'this help' },
]
