import Link from 'next/link'
import type { ComponentProps } from 'react'

type Tone = 'lamp' | 'plain' | 'bare'

const TONES: Record<Tone, string> = {
  // The one action that a screen is about.
  lamp: 'bg-lamp text-lamp-ink border-transparent hover:brightness-110',
  plain: 'bg-raise text-text border-edge/50 hover:border-edge',
  bare: 'bg-transparent text-mute border-transparent hover:text-text underline underline-offset-4 decoration-line',
}

const SHAPE =
  'inline-flex min-h-9 items-center justify-center gap-2 rounded-control border px-3.5 py-1.5 text-small font-semibold disabled:opacity-50 disabled:cursor-not-allowed'

export function Button({ tone = 'plain', className = '', ...rest }: ComponentProps<'button'> & { tone?: Tone }) {
  return <button type="button" className={`${SHAPE} ${TONES[tone]} ${className}`} {...rest} />
}

export function ButtonLink({ tone = 'plain', className = '', ...rest }: ComponentProps<typeof Link> & { tone?: Tone }) {
  return <Link className={`${SHAPE} ${TONES[tone]} ${className}`} {...rest} />
}
