'use client'

import { useId } from 'react'
import type { ListAngleUnit, ListFrame, ListMapping } from '@/db/schema/matching'
import { Button } from '@/components/ui/button'
import type { ListColumn } from '@/lib/work/matching/list-mapping'

const UNITS: Record<ListAngleUnit, string> = {
  deg: 'degrees',
  hour: 'hours',
  rad: 'radians',
  text: 'sexagesimal',
}
const FRAMES: Record<ListFrame, string> = {
  ICRS: 'ICRS',
  FK5: 'FK5, J2000',
  GALACTIC: 'galactic',
}

function Choice<T extends string>({
  label,
  value,
  options,
  onChoose,
}: {
  label: string
  value: T
  options: readonly { value: T; label: string }[]
  onChoose: (value: T) => void
}) {
  const id = useId()
  return (
    <div className="flex min-w-0 flex-col gap-1">
      <label htmlFor={id} className="text-small font-semibold">
        {label}
      </label>
      <select
        id={id}
        value={value}
        onChange={(event) => onChoose(event.target.value as T)}
        className="min-h-9 w-full rounded-control border border-edge bg-well px-2 text-small text-text"
      >
        {options.map((option) => (
          <option key={option.value} value={option.value}>
            {option.label}
          </option>
        ))}
      </select>
    </div>
  )
}

/** Which columns hold what, in which unit and frame, as it was guessed and to be changed. */
export function ColumnChoices({
  columns,
  mapping,
  onChange,
}: {
  columns: readonly ListColumn[]
  mapping: ListMapping
  onChange: (mapping: ListMapping) => void
}) {
  const set = (change: Partial<ListMapping>) => onChange({ ...mapping, ...change })
  const named = columns.map(({ name, sample }) => ({
    value: name,
    label: sample ? `${name} (${sample.trim().slice(0, 18)})` : name,
  }))
  const must = [{ value: '', label: 'choose' }, ...named]
  const may = [{ value: '', label: 'none' }, ...named]
  const isGalactic = mapping.frame === 'GALACTIC'
  const units = (Object.keys(UNITS) as ListAngleUnit[]).map((value) => ({ value, label: UNITS[value] }))
  const frames = (Object.keys(FRAMES) as ListFrame[]).map((value) => ({ value, label: FRAMES[value] }))
  const taken = [mapping.ra, mapping.dec, mapping.name, mapping.redshift]
  const free = columns.map(({ name }) => name).filter((name) => !taken.includes(name))
  const more = mapping.more.filter((name) => free.includes(name))
  const swap = () => set({ ra: mapping.dec, dec: mapping.ra, raUnit: mapping.decUnit, decUnit: mapping.raUnit })
  return (
    <div className="flex flex-col gap-5">
      <div className="grid gap-4 sm:grid-cols-[minmax(0,2fr)_minmax(0,1fr)]">
        <Choice
          label={isGalactic ? 'Galactic longitude' : 'Right ascension'}
          value={mapping.ra}
          options={must}
          onChoose={(ra) => set({ ra })}
        />
        <Choice label="Its unit" value={mapping.raUnit} options={units} onChoose={(raUnit) => set({ raUnit })} />
        <Choice
          label={isGalactic ? 'Galactic latitude' : 'Declination'}
          value={mapping.dec}
          options={must}
          onChoose={(dec) => set({ dec })}
        />
        <Choice label="Its unit" value={mapping.decUnit} options={units} onChoose={(decUnit) => set({ decUnit })} />
        <Choice label="Frame" value={mapping.frame} options={frames} onChoose={(frame) => set({ frame })} />
        <div className="flex items-end">
          <Button onClick={swap}>Swap the two</Button>
        </div>
        <Choice
          label="Name of the object"
          value={mapping.name ?? ''}
          options={may}
          onChoose={(name) => set({ name: name || null })}
        />
        <Choice
          label="Redshift"
          value={mapping.redshift ?? ''}
          options={may}
          onChoose={(redshift) => set({ redshift: redshift || null })}
        />
      </div>
      {free.length > 0 ? (
        <fieldset className="flex flex-col gap-1.5">
          <legend className="text-small font-semibold">Further columns to keep with each object</legend>
          <div className="flex max-h-40 flex-wrap gap-x-5 gap-y-1 overflow-y-auto">
            {free.map((name) => (
              <label key={name} className="inline-flex min-h-7 items-center gap-2 text-small">
                <input
                  type="checkbox"
                  checked={more.includes(name)}
                  onChange={(event) =>
                    set({ more: event.target.checked ? [...more, name] : more.filter((one) => one !== name) })
                  }
                  className="size-4 accent-lamp"
                />
                {name}
              </label>
            ))}
          </div>
        </fieldset>
      ) : null}
    </div>
  )
}
