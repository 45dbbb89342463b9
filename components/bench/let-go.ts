import type { MouseEvent } from 'react'

/**
 * A click handler that takes the focus off the button after a mouse or a finger, so that Space goes on to blink and does not
 * press the button again. A click made with the keyboard (detail 0) keeps the focus where the person put it.
 */
export function letGo(act: () => void): (event: MouseEvent<HTMLElement>) => void {
  return (event) => {
    if (event.detail > 0) event.currentTarget.blur()
    act()
  }
}
