import { X } from 'lucide-react'
import { useId, useState } from 'react'
import { Button } from '@/components/ui/button'
import { askSamples } from './recipe-api'

export interface Sample {
  id: number
  name: string
}

/** Which of the campaign's candidates the recipe is tried on: others by lot, or by name. */
export function SampleChooser({
  slug,
  samples,
  most,
  onChange,
}: {
  slug: string
  samples: Sample[]
  most: number
  onChange: (samples: Sample[]) => void
}) {
  const id = useId()
  const [name, setName] = useState('')
  const [note, setNote] = useState<string | null>(null)
  const ask = async (part?: string) => {
    try {
      const found = await askSamples(slug, part ? most : Math.max(1, samples.length || 4), part)
      if (!part) return onChange(found)
      const fresh = found.filter((one) => !samples.some((sample) => sample.id === one.id))
      if (found.length === 0) return setNote(`No candidate with cutouts has ‘${part}’ in its name.`)
      if (fresh.length === 0) return setNote('That one is here already.')
      // The name that was meant is the shortest that contains what was typed; it takes the place of the oldest.
      onChange([...samples, fresh[0]].slice(-most))
      setName('')
      setNote(null)
    } catch (error) {
      setNote(error instanceof Error ? error.message : String(error))
    }
  }
  return (
    <div className="flex flex-col gap-2">
      <div className="flex flex-wrap items-end gap-x-3 gap-y-2">
        <form
          className="flex items-end gap-2"
          onSubmit={(event) => {
            event.preventDefault()
            if (name.trim()) void ask(name.trim())
          }}
        >
          <span className="flex flex-col gap-1">
            <label htmlFor={id} className="text-note text-mute">
              Add by name
            </label>
            <input
              id={id}
              value={name}
              onChange={(event) => setName(event.target.value)}
              className="figures min-h-9 w-44 rounded-control border border-edge bg-well px-2 text-small"
            />
          </span>
          <Button type="submit" disabled={!name.trim()}>
            Add
          </Button>
        </form>
        <Button onClick={() => void ask()}>Others by lot</Button>
      </div>
      <ul aria-label="Tried on" className="flex flex-wrap gap-1.5">
        {samples.map((sample) => (
          <li key={sample.id} className="flex items-center rounded-key border border-line pl-2 text-note">
            <span className="figures">{sample.name}</span>
            <button
              type="button"
              aria-label={`Leave out ${sample.name}`}
              disabled={samples.length === 1}
              onClick={() => onChange(samples.filter(({ id: own }) => own !== sample.id))}
              className="grid size-7 place-items-center text-mute hover:text-text disabled:opacity-40"
            >
              <X size={12} aria-hidden="true" />
            </button>
          </li>
        ))}
      </ul>
      {note ? (
        <p role="status" className="text-note text-mute">
          {note}
        </p>
      ) : null}
    </div>
  )
}
