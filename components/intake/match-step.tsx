'use client'

import { useEffect, useMemo, useRef, useState } from 'react'
import { counted } from '@/components/campaigns/in-words'
import { ToolButton } from '@/components/table/tool-button'
import { Button } from '@/components/ui/button'
import { Notice } from '@/components/ui/notice'
import { kindOfName } from '@/lib/work/intake/file-name'
import type { LookedUp } from '@/lib/work/intake/look-up-files'
import type { ChosenColumns } from '@/lib/work/intake/manifest-columns'
import { checkedPattern } from '@/lib/work/intake/match-work'
import type { ChosenFile } from './collect-files'
import type { MatchingRules } from './how-matched'
import { ManifestChoices } from './manifest-choices'
import { MatchTable } from './match-table'
import type { FileToSend } from './upload-queue'
import { useFirstBytes } from './use-first-bytes'
import { useMatch } from './use-match'

/** The hash of the file of this name and size on the server, for comparing before it is sent. */
export function knownHash(here: LookedUp | null, index: number, { file }: ChosenFile): string | undefined {
  const known = here?.files[index]
  return known?.bytes === file.size ? known.sha256 : undefined
}

/** Saves the pattern; rejects or answers a sentence when it could not. */
export type SavePattern = (pattern: string) => Promise<string | null>

/** Between dropping and sending: what will go where, and what to change about it. Nothing has left this computer yet. */
export function MatchStep({
  files,
  rules,
  ask,
  savePattern,
  onTake,
  onDrop,
}: {
  files: ChosenFile[]
  rules: MatchingRules
  ask: (names: string[]) => Promise<LookedUp>
  savePattern: SavePattern
  onTake: (files: FileToSend[]) => void
  onDrop: () => void
}) {
  const [typed, setTyped] = useState(rules.pattern)
  const [chosen, setChosen] = useState<Record<string, ChosenColumns>>({})
  const [onlyProblems, setOnlyProblems] = useState(false)
  const [here, setHere] = useState<LookedUp | null>(null)
  const [fault, setFault] = useState<string | null>(null)
  const [taking, setTaking] = useState(false)
  const heading = useRef<HTMLHeadingElement>(null)
  // The button that opened this is gone, and with it the place of whoever goes by keyboard.
  useEffect(() => heading.current?.focus(), [])
  useEffect(() => {
    let gone = false
    ask(files.map(({ name }) => name)).then(
      (answer) => void (gone || setHere(answer)),
      (error: unknown) =>
        void (
          gone ||
          setFault(
            `${error instanceof Error ? error.message : String(error)} What is here already is sent again, which changes nothing.`,
          )
        ),
    )
    return () => void (gone = true)
  }, [files, ask])

  const checked = checkedPattern(typed)
  const pattern = checked.pattern ?? rules.pattern
  const faults = useFirstBytes(files)
  const work = useMemo(
    () => ({
      files: files.map(({ name, file }, at) => ({ name, bytes: file.size, fault: faults.get(at) })),
      manifests: files.filter(({ name }) => kindOfName(name) === 'manifest'),
      chosen,
      pattern,
      bands: rules.bands,
      here,
    }),
    [files, faults, chosen, pattern, rules.bands, here],
  )
  const { done, fault: matchFault, busy } = useMatch(work)
  const rows = useMemo(
    () => (done?.preview.rows ?? []).filter(({ problem }) => !onlyProblems || problem !== null),
    [done, onlyProblems],
  )

  async function take() {
    setTaking(true)
    if (pattern !== rules.pattern) {
      const refused = await savePattern(pattern).catch(() => 'The name pattern could not be saved. Try again.')
      if (refused !== null) {
        setFault(refused)
        setTaking(false)
        return
      }
    }
    onTake(
      files.map((file, index) => ({
        ...file,
        // A manifest whose columns were chosen goes to the server in any case, which reads it again by them.
        ...(chosen[file.name]
          ? { columns: JSON.stringify(chosen[file.name]) }
          : { known: knownHash(here, index, file) }),
      })),
    )
  }

  const problems = done?.preview.problems ?? 0
  const stamps = done?.preview.stamps ?? 0
  return (
    <section
      aria-label="Files to be taken in"
      className="flex flex-col gap-4 rounded-tray border border-line px-5 py-5"
    >
      <div className="flex flex-wrap items-baseline justify-between gap-x-6 gap-y-1">
        <h2 ref={heading} tabIndex={-1} className="text-title font-semibold outline-none" aria-live="polite">
          {done
            ? `${counted(files.length, 'file')} for ${counted(done.preview.candidates, 'candidate')}${stamps > 0 ? `, ${counted(stamps, 'calibration stamp')} among them` : ''}${problems > 0 ? `, ${counted(problems, 'problem')}` : ', no problem seen'}`
            : `Matching ${counted(files.length, 'file')}…`}
        </h2>
        <p className="text-note text-mute">{busy && done ? 'Matching…' : 'Nothing has been sent yet.'}</p>
      </div>
      <label className="flex flex-col gap-1 text-note text-mute">
        Name pattern
        <input
          value={typed}
          onChange={(event) => setTyped(event.target.value)}
          aria-invalid={checked.fault !== null}
          spellCheck={false}
          className="figures min-h-9 max-w-md rounded-control border border-edge bg-well px-2.5 text-small text-text aria-invalid:border-alarm"
        />
        <span className={checked.fault === null ? '' : 'text-alarm'}>
          {checked.fault === null
            ? pattern === rules.pattern
              ? 'How names tell candidate and band, with {candidate}, {band} and {any}.'
              : 'Saved for this campaign when you take the files in.'
            : checked.fault}
        </span>
      </label>
      {done?.manifests.map((manifest) => (
        <ManifestChoices
          key={manifest.name}
          manifest={manifest}
          onChoose={(change) =>
            setChosen((before) => ({ ...before, [manifest.name]: { ...before[manifest.name], ...change } }))
          }
        />
      ))}
      {done ? (
        <MatchTable rows={rows} />
      ) : (
        <div aria-hidden="true" className="h-80 animate-pulse rounded-control bg-raise" />
      )}
      {(fault ?? matchFault) ? <Notice tone="alarm">{fault ?? matchFault}</Notice> : null}
      <div className="flex flex-wrap items-center gap-3">
        <Button tone="lamp" onClick={() => void take()} disabled={taking || checked.fault !== null}>
          Take them in
        </Button>
        <Button onClick={onDrop}>Not these</Button>
        {problems > 0 ? (
          <ToolButton aria-pressed={onlyProblems} onClick={() => setOnlyProblems(!onlyProblems)}>
            {onlyProblems ? 'Show all files' : `Show the ${counted(problems, 'problem')} only`}
          </ToolButton>
        ) : null}
      </div>
    </section>
  )
}
