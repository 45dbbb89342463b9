import type { ComponentProps } from 'react'

/** A button in the line of the text, for what is done beside the one action of a screen. */
export function TextButton({ className = '', ...rest }: ComponentProps<'button'>) {
  return (
    <button
      type="button"
      className={`min-h-7 text-left text-note text-mute underline decoration-edge underline-offset-4 hover:text-text disabled:opacity-50 ${className}`}
      {...rest}
    />
  )
}
