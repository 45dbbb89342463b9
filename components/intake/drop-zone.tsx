'use client'

import { FolderUp, Upload } from 'lucide-react'
import { useEffect, useRef, useState, type DragEvent } from 'react'
import { Button } from '@/components/ui/button'
import { chosenFiles, droppedFiles, type Chosen } from './collect-files'

/** A place to drop files and folders, and two buttons that open the same with a keyboard. `isBack`: after a look at matches. */
export function DropZone({ onChosen, isBack = false }: { onChosen: (chosen: Chosen) => void; isBack?: boolean }) {
  const section = useRef<HTMLElement>(null)
  const files = useRef<HTMLInputElement>(null)
  const folder = useRef<HTMLInputElement>(null)
  const [over, setOver] = useState(false)
  const [opening, setOpening] = useState(false)

  // After the matches were looked at it stands in their place, and whoever goes by keyboard goes on here.
  useEffect(() => {
    if (isBack) section.current?.querySelector('button')?.focus()
  }, [isBack])

  async function drop(event: DragEvent) {
    event.preventDefault()
    setOver(false)
    setOpening(true)
    try {
      onChosen(await droppedFiles(event.dataTransfer))
    } finally {
      setOpening(false)
    }
  }

  function choose(input: HTMLInputElement) {
    onChosen(chosenFiles(input.files ?? []))
    // So that choosing the same files again is a change.
    input.value = ''
  }

  return (
    <section
      ref={section}
      aria-label="Send files"
      onDragOver={(event) => {
        event.preventDefault()
        setOver(true)
      }}
      onDragLeave={(event) => {
        if (!event.currentTarget.contains(event.relatedTarget as Node | null)) setOver(false)
      }}
      onDrop={(event) => void drop(event)}
      className={`flex flex-col items-start gap-4 rounded-tray border border-dashed px-6 py-7 ${
        over ? 'border-lamp bg-raise' : 'border-edge/60'
      }`}
    >
      <p className="text-body">
        {opening
          ? 'Opening what you dropped…'
          : over
            ? 'Let go to take them in hand.'
            : 'Drop FITS files, folders, archives (zip, tar, tar.gz) and a CSV manifest here.'}
      </p>
      <div className="flex flex-wrap gap-3">
        <Button tone="lamp" onClick={() => files.current?.click()}>
          <Upload size={16} aria-hidden="true" />
          Choose files
        </Button>
        <Button onClick={() => folder.current?.click()}>
          <FolderUp size={16} aria-hidden="true" />
          Choose a folder
        </Button>
      </div>
      <input
        ref={files}
        type="file"
        multiple
        hidden
        aria-label="Files to send"
        onChange={(event) => choose(event.currentTarget)}
      />
      <input
        ref={folder}
        type="file"
        hidden
        aria-label="Folder to send"
        // React has no type for it; every browser in use does.
        {...{ webkitdirectory: '' }}
        onChange={(event) => choose(event.currentTarget)}
      />
    </section>
  )
}
