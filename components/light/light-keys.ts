/** Keys of Light, the same wherever a candidate is looked at. */
import type { LightStore } from './light-store'

export type LightCommand =
  'toggle' | 'field' | 'reset' | 'invert' | 'closer' | 'farther' | 'left' | 'right' | 'up' | 'down'

interface Pressed {
  key: string
  ctrlKey: boolean
  altKey: boolean
  metaKey: boolean
  shiftKey: boolean
  repeat: boolean
  isComposing: boolean
}

const ONCE: Record<string, LightCommand> = { l: 'toggle', f: 'field', i: 'invert', '0': 'reset' }
/** Shifted on many layouts, and held down to go on. */
const AGAIN: Record<string, LightCommand> = { '+': 'closer', '=': 'closer', '-': 'farther', _: 'farther' }
const MOVES: Record<string, LightCommand> = {
  ArrowLeft: 'left',
  ArrowRight: 'right',
  ArrowUp: 'up',
  ArrowDown: 'down',
}

/** null: not a key of Light. The caller leaves out keys pressed while typing. */
export function lightCommandOf(event: Pressed): LightCommand | null {
  if (event.isComposing || event.ctrlKey || event.altKey || event.metaKey) return null
  if (event.shiftKey && MOVES[event.key]) return MOVES[event.key]
  if (AGAIN[event.key]) return AGAIN[event.key]
  if (event.shiftKey || event.repeat) return null
  return ONCE[event.key.toLowerCase()] ?? null
}

/** Share of the box that a key moves a picture. */
const MOVE = 0.15

export function runLight(light: LightStore, command: LightCommand): void {
  if (command === 'toggle') light.setOpen(!light.open, true)
  if (command === 'field') light.setClose(!light.close)
  if (command === 'reset') light.reset()
  if (command === 'invert') light.change({ invert: !light.settings.invert })
  if (command === 'closer') light.zoom.step(1)
  if (command === 'farther') light.zoom.step(-1)
  if (command === 'left') light.zoom.pan(-MOVE, 0)
  if (command === 'right') light.zoom.pan(MOVE, 0)
  if (command === 'up') light.zoom.pan(0, -MOVE)
  if (command === 'down') light.zoom.pan(0, MOVE)
}

/** For tables of keys. */
export const LIGHT_KEYS: { keys: string[]; does: string }[] = [
  { keys: ['L'], does: 'light: black, white and softening by arrow keys' },
  { keys: ['F'], does: 'field of view: close, or the whole cutout' },
  { keys: ['I'], does: 'invert' },
  { keys: ['+', '-'], does: 'closer, farther; Shift and arrows move' },
  { keys: ['0'], does: 'the recipe’s own picture again, whole' },
]
