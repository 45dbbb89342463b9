'use client'

import { Check, Copy } from 'lucide-react'
import { useState, type ReactNode } from 'react'

/** Without https there is no clipboard interface; selecting a hidden field and copying it works everywhere. */
async function copy(text: string): Promise<void> {
  if (navigator.clipboard) return navigator.clipboard.writeText(text)
  const field = document.createElement('textarea')
  field.value = text
  field.style.cssText = 'position:fixed;opacity:0'
  document.body.append(field)
  field.select()
  document.execCommand('copy')
  field.remove()
}

function useCopied(text: string) {
  const [copied, setCopied] = useState(false)
  const run = async () => {
    await copy(text)
    setCopied(true)
    setTimeout(() => setCopied(false), 1500)
  }
  return { copied, run: () => void run().catch(() => setCopied(false)) }
}

/** A figure that a click copies. `text` is what is copied, where it is not what is shown. */
export function CopyText({ text, what, children }: { text: string; what: string; children?: ReactNode }) {
  const { copied, run } = useCopied(text)
  return (
    <button
      type="button"
      onClick={run}
      title={copied ? 'Copied' : `Copy ${text}`}
      aria-label={copied ? `${what} copied` : `Copy ${what} ${text}`}
      className={`relative inline-flex min-h-6 items-center rounded-key decoration-edge underline-offset-4 hover:underline ${copied ? 'text-lamp' : ''}`}
    >
      {copied ? <Check size={11} aria-hidden="true" className="absolute -left-3" /> : null}
      {children ?? text}
    </button>
  )
}

/** Beside a link, which a click follows. */
export function CopyButton({ text, what }: { text: string; what: string }) {
  const { copied, run } = useCopied(text)
  const Icon = copied ? Check : Copy
  return (
    <button
      type="button"
      onClick={run}
      title={copied ? 'Copied' : `Copy ${text}`}
      aria-label={copied ? `${what} copied` : `Copy ${what} ${text}`}
      className="grid size-6 place-items-center rounded-key text-mute hover:text-text"
    >
      <Icon size={13} aria-hidden="true" className={copied ? 'text-lamp' : ''} />
    </button>
  )
}
