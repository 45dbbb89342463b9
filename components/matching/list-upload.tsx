'use client'

import { Upload } from 'lucide-react'
import { useRouter } from 'next/navigation'
import { useRef, useState } from 'react'
import { Button } from '@/components/ui/button'
import { Notice } from '@/components/ui/notice'
import { sendList } from './known-api'

/** Sends one file and goes on to the choice of its columns. What is refused is said here; the file stays on the person's disk. */
export function ListUpload({ slug, tone = 'lamp' }: { slug: string; tone?: 'lamp' | 'plain' }) {
  const router = useRouter()
  const input = useRef<HTMLInputElement>(null)
  const [over, setOver] = useState(false)
  const [sending, setSending] = useState<string | null>(null)
  const [fault, setFault] = useState<string | null>(null)

  async function send(file: File | undefined) {
    if (!file || sending !== null) return
    setSending(file.name)
    setFault(null)
    try {
      const { id } = await sendList(slug, file)
      router.push(`/campaigns/${slug}/known/${id}`)
    } catch (error) {
      setFault(`${file.name}: ${error instanceof Error ? error.message : String(error)}`)
      setSending(null)
    }
  }

  return (
    <section
      aria-label="Send a list"
      onDragOver={(event) => {
        event.preventDefault()
        setOver(true)
      }}
      onDragLeave={(event) => {
        if (!event.currentTarget.contains(event.relatedTarget as Node | null)) setOver(false)
      }}
      onDrop={(event) => {
        event.preventDefault()
        setOver(false)
        void send(event.dataTransfer.files[0])
      }}
      className={`flex flex-col items-start gap-4 rounded-tray border border-dashed px-6 py-6 ${
        over ? 'border-lamp bg-raise' : 'border-edge/60'
      }`}
    >
      <p aria-live="polite">
        {sending
          ? `Sending ${sending}…`
          : over
            ? 'Let go to send it.'
            : 'Drop a CSV or a VOTable of known objects here. Nothing is matched before you have seen how it is read.'}
      </p>
      {fault ? <Notice tone="alarm">{fault}</Notice> : null}
      <Button tone={tone} disabled={sending !== null} onClick={() => input.current?.click()}>
        <Upload size={16} aria-hidden="true" />
        Choose a list
      </Button>
      <input
        ref={input}
        type="file"
        hidden
        aria-label="List to send"
        onChange={(event) => {
          void send(event.currentTarget.files?.[0])
          // So that choosing the same file again is a change.
          event.currentTarget.value = ''
        }}
      />
    </section>
  )
}
