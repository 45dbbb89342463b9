/**
 * Which key does what at the bench. A person may give each action another key; everything else works with the keys that the
 * actions come with, into which what is pressed is translated first (WCAG 2.2, success criterion 2.1.4).
 */

export interface KeyAction {
  /** The key that the action comes with, which names it too. */
  key: string
  does: string
}

export const KEY_ACTIONS: readonly KeyAction[] = [
  { key: 'A', does: 'grade A, sure' },
  { key: 'B', does: 'grade B, probable' },
  { key: 'C', does: 'grade C, possible' },
  { key: 'N', does: 'grade N, not a lens' },
  { key: 'U', does: 'cannot judge' },
  { key: 'Z', does: 'undo' },
  { key: 'K', does: 'keep the grade' },
  { key: 'W', does: 'say why it cannot be judged' },
  { key: 'T', does: 'tags' },
  { key: 'M', does: 'remark' },
  { key: 'X', does: 'blink, held' },
  { key: 'R', does: 'ruler' },
  { key: 'O', does: 'circle' },
  { key: 'L', does: 'light' },
  { key: 'F', does: 'field of view' },
  { key: 'I', does: 'invert' },
  { key: '+', does: 'closer' },
  { key: '-', does: 'farther' },
  { key: '0', does: 'the recipe’s own picture' },
  { key: 'E', does: 'end the sitting, or go on' },
  { key: ',', does: 'change the keys' },
  { key: 'H', does: 'help' },
]

/** The keys that differ from those that actions come with, by the latter. */
export type KeyChoice = Readonly<Record<string, string>>

/** Other keys of the same action on other layouts. */
const TWINS: Readonly<Record<string, string>> = { '=': '+', _: '-' }
const ACTION_KEYS = new Set(KEY_ACTIONS.map(({ key }) => key))

const upper = (key: string) => (key.length === 1 ? key.toUpperCase() : key)

/** The key of an action, for labels. Keys that no action comes with are what they are. */
export const keyOf = (choice: KeyChoice, action: string): string => choice[action] ?? action

/** The key that this one stands for; null for one that has been taken away from its action. */
export function translateKey(choice: KeyChoice, pressed: string): string | null {
  const key = upper(pressed)
  const action = Object.keys(choice).find((one) => choice[one] === key)
  if (action) return action
  const own = TWINS[key] ?? key
  return ACTION_KEYS.has(own) && own in choice ? null : pressed
}

export type KeyChange = { choice: KeyChoice } | { refused: string }

/** Gives an action another key, unless that would take it from another action. */
export function changeKey(choice: KeyChoice, action: string, pressed: string): KeyChange {
  const key = upper(pressed)
  if (!/^[^\s\p{C}]$/u.test(key)) {
    return { refused: 'Take a letter, a figure or a sign: Space, Enter, Esc, Tab and the arrows keep their places.' }
  }
  if (/^[1-9]$/.test(key)) return { refused: `${key} shows a view and picks a tag. Take another key.` }
  if (key === '?') return { refused: '? always opens the help. Take another key.' }
  const holder = KEY_ACTIONS.find((other) => other.key !== action && keyOf(choice, other.key) === (TWINS[key] ?? key))
  const holds = holder ?? KEY_ACTIONS.find((other) => other.key !== action && keyOf(choice, other.key) === key)
  if (holds) return { refused: `${key} is already the key for: ${holds.does}. Give that another key first.` }
  const { [action]: _, ...others } = choice
  return { choice: key === action ? others : { ...others, [action]: key } }
}

/** What was stored, without what is no action or no key any more and without two actions on one key. */
export function readChoice(stored: unknown): KeyChoice {
  if (typeof stored !== 'object' || stored === null) return {}
  let choice: KeyChoice = {}
  for (const [action, key] of Object.entries(stored)) {
    if (!ACTION_KEYS.has(action) || typeof key !== 'string') continue
    const { [action]: _, ...others } = choice
    choice = { ...others, [action]: upper(key) }
  }
  const keys = KEY_ACTIONS.map(({ key }) => keyOf(choice, key))
  return new Set(keys).size === keys.length ? choice : {}
}
