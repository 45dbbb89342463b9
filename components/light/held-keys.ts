/** Keys of a slider while there is nothing yet that they could move: they are counted, and move it once there is. */
import type { LightStore } from './light-store'
import { STEPS, type SliderScale } from './slider-scales'

/** As browsers move a range: arrows by a step, pages by a tenth, Home and End all the way. */
const STEPS_OF: Record<string, number> = {
  ArrowRight: 1,
  ArrowUp: 1,
  ArrowLeft: -1,
  ArrowDown: -1,
  PageUp: STEPS / 10,
  PageDown: -STEPS / 10,
  Home: -STEPS,
  End: STEPS,
}

interface Pressed {
  key: string
  ctrlKey: boolean
  altKey: boolean
  metaKey: boolean
  shiftKey: boolean
}

/** How far a key moves a slider; 0 where it is none of a slider's. */
export const stepsOf = ({ key, ctrlKey, altKey, metaKey, shiftKey }: Pressed): number =>
  ctrlKey || altKey || metaKey || shiftKey ? 0 : (STEPS_OF[key] ?? 0)

/** Moves a slider from where it stands once the picture is drawn. */
export function moveWhenDrawn(
  light: LightStore,
  scale: SliderScale,
  read: (light: LightStore) => number | null,
  write: (light: LightStore, value: number) => void,
  steps: number,
): void {
  light.whenDrawn(() => {
    const value = read(light)
    if (value !== null) write(light, scale.value(Math.max(0, Math.min(STEPS, scale.place(value) + steps))))
  })
}
