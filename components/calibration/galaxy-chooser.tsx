'use client'

import { useEffect, useEffectEvent, useRef, useState } from 'react'
import { counted } from '@/components/campaigns/in-words'
import { Button } from '@/components/ui/button'
import { StampFigure } from '@/components/ui/stamp-figure'
import type { Galaxy } from '@/lib/work/calibration/calibration-page'
import { GALAXY_FILTERS, type GalaxyFilter } from '@/lib/work/calibration/galaxy-filters'
import { askGalaxies } from './calibration-api'

const NAMES: Record<GalaxyFilter, string> = { 'set aside': 'Set aside', 'graded N': 'Graded N only', any: 'All' }

/** The campaign's own galaxies, of which the lead takes some: each a stamp that is a switch. */
export function GalaxyChooser({
  slug,
  first,
  made,
  chosen,
  onChoose,
}: {
  slug: string
  first: { which: GalaxyFilter; galaxies: Galaxy[] }
  /** Stamps that there are: each takes its galaxy off the list. */
  made: number
  chosen: ReadonlySet<number>
  onChoose: (ids: ReadonlySet<number>) => void
}) {
  const [{ which, galaxies }, setShown] = useState(first)
  const [name, setName] = useState('')
  const [trouble, setTrouble] = useState<string | null>(null)
  const look = async (filter: GalaxyFilter, text: string) => {
    setTrouble(null)
    try {
      setShown({ which: filter, galaxies: (await askGalaxies(slug, filter, text)).galaxies })
    } catch (error) {
      setTrouble(error instanceof Error ? error.message : String(error))
    }
  }
  const lookAgain = useEffectEvent(() => void look(which, name))
  const before = useRef(made)
  useEffect(() => {
    if (made === before.current) return
    before.current = made
    lookAgain()
  }, [made])
  const toggle = (id: number) => {
    const next = new Set(chosen)
    if (!next.delete(id)) next.add(id)
    onChoose(next)
  }
  return (
    <div className="flex flex-col gap-3">
      <div className="flex flex-wrap items-end gap-3">
        <div role="group" aria-label="Which galaxies" className="flex flex-wrap gap-1.5">
          {GALAXY_FILTERS.map((filter) => (
            <Button
              key={filter}
              aria-pressed={filter === which}
              onClick={() => void look(filter, name)}
              className="aria-pressed:border-text"
            >
              {NAMES[filter]}
            </Button>
          ))}
        </div>
        <form
          role="search"
          className="flex gap-1.5"
          onSubmit={(event) => {
            event.preventDefault()
            void look(which, name)
          }}
        >
          <input
            aria-label="Part of the name"
            placeholder="Part of the name"
            value={name}
            onChange={(event) => setName(event.target.value)}
            className="min-h-9 w-40 rounded-control border border-edge bg-well px-3 text-small placeholder:text-mute"
          />
          <Button type="submit">Find</Button>
        </form>
      </div>
      {trouble ? (
        <p role="alert" className="text-small text-alarm">
          {trouble}
        </p>
      ) : null}
      {galaxies.length === 0 ? (
        <p className="text-small text-mute">
          No candidate fits. Those that are confirmed, or have been made into a stamp already, are left out.
        </p>
      ) : (
        <ul className="night grid max-h-[26rem] grid-cols-[repeat(auto-fill,minmax(5.25rem,1fr))] gap-2 overflow-y-auto rounded-tray bg-tray p-3 text-text">
          {galaxies.map((galaxy) => (
            <li key={galaxy.id}>
              <button
                type="button"
                aria-pressed={chosen.has(galaxy.id)}
                onClick={() => toggle(galaxy.id)}
                className="group block w-full rounded-key text-left"
              >
                <StampFigure
                  src={galaxy.picture?.url ?? null}
                  alt=""
                  width={galaxy.picture?.width ?? 1}
                  height={galaxy.picture?.height ?? 1}
                  geometry={null}
                  overlay={false}
                  className="rounded-key outline-2 outline-offset-1 outline-transparent group-aria-pressed:outline-lamp [&>p]:hidden"
                />
                <span className="figures mt-1 block truncate text-[0.6875rem] text-tray-text group-aria-pressed:text-text">
                  {chosen.has(galaxy.id) ? '✓ ' : ''}
                  {galaxy.name}
                </span>
              </button>
            </li>
          ))}
        </ul>
      )}
      <div className="flex flex-wrap items-center gap-3 text-small">
        <span aria-live="polite">
          {chosen.size === 0 ? 'None chosen' : `${counted(chosen.size, 'galaxy', 'galaxies')} chosen`}
        </span>
        <Button
          disabled={galaxies.every(({ id }) => chosen.has(id))}
          onClick={() => onChoose(new Set([...chosen, ...galaxies.map(({ id }) => id)]))}
        >
          Choose all {galaxies.length} shown
        </Button>
        {chosen.size > 0 ? (
          <Button tone="bare" onClick={() => onChoose(new Set())}>
            Choose none
          </Button>
        ) : null}
      </div>
    </div>
  )
}
