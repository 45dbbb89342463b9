'use client'

import { useContext } from 'react'
import { KeyNames } from './key-names'

/** A key, by the one that its action comes with: shown is the person's own, and nothing where single keys are switched off. */
export function KeyCap({ children }: { children: string }) {
  const name = useContext(KeyNames)
  const shown = name ? name(children) : children
  if (shown === null) return null
  return (
    <kbd className="figures inline-block short:hidden min-w-5 rounded-key border border-edge/60 bg-raise px-1.5 text-center text-[0.6875rem] font-semibold leading-4 text-text">
      {shown}
    </kbd>
  )
}
