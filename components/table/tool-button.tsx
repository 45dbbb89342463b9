import type { ComponentProps } from 'react'

/** A quiet button of a table's tool row. */
export function ToolButton({ className = '', ...rest }: ComponentProps<'button'>) {
  return (
    <button
      type="button"
      className={`inline-flex min-h-8 items-center gap-1.5 rounded-control border border-edge/40 px-2.5 text-small text-mute hover:border-edge hover:text-text aria-expanded:text-text disabled:cursor-not-allowed disabled:opacity-40 ${className}`}
      {...rest}
    />
  )
}
