'use client'

import { useState } from 'react'
import { FormNote } from '@/components/people/form-note'
import { useKeptForm, type FormAction } from '@/components/people/use-kept-form'
import { Button } from '@/components/ui/button'
import { TextField } from '@/components/ui/field'

export interface CosmologyChoice {
  cosmology: 'flat LCDM' | 'Planck 2018'
  hubbleConstant: number
  omegaMatter: number
}

const KINDS = [
  ['flat LCDM', 'Flat ΛCDM with H₀ and Ωm', 'Two numbers, no radiation. 70 and 0.3 are what most papers compare by.'],
  ['Planck 2018', 'Planck 2018', 'H₀ 67.66, Ωm 0.30966, with photons and neutrinos (A&A 641, A6, Table 2).'],
] as const

/** In which cosmology measured angles become masses and time delays. */
export function CosmologyForm({ choice, action }: { choice: CosmologyChoice; action: FormAction }) {
  const { state, pending, formProps } = useKeptForm(action)
  const [kind, setKind] = useState(choice.cosmology)
  return (
    <form {...formProps} className="flex flex-col gap-4" aria-label="Cosmology">
      <fieldset className="flex flex-col gap-2.5">
        <legend className="sr-only">Cosmology</legend>
        {KINDS.map(([value, label, about]) => (
          <label key={value} className="flex items-start gap-2.5">
            <input
              type="radio"
              name="cosmology"
              value={value}
              checked={kind === value}
              onChange={() => setKind(value)}
              className="mt-1 size-4 shrink-0 accent-lamp"
            />
            <span>
              {label}
              <span className="block text-note text-mute">{about}</span>
            </span>
          </label>
        ))}
      </fieldset>
      {kind === 'flat LCDM' ? (
        <div className="grid max-w-md gap-4 sm:grid-cols-2">
          <TextField
            label="H₀, km/s/Mpc"
            name="hubbleConstant"
            inputMode="decimal"
            defaultValue={choice.hubbleConstant}
            error={state.errors?.hubbleConstant}
          />
          <TextField
            label="Ωm"
            name="omegaMatter"
            inputMode="decimal"
            defaultValue={choice.omegaMatter}
            error={state.errors?.omegaMatter}
          />
        </div>
      ) : null}
      <FormNote state={state} />
      <Button type="submit" disabled={pending} className="self-start">
        {pending ? 'Saving…' : 'Save the cosmology'}
      </Button>
    </form>
  )
}
