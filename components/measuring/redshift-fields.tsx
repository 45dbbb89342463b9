'use client'

import { useId } from 'react'
import { TextButton } from '@/components/ui/text-button'
import type { CandidateMeasurements } from '@/lib/work/measuring/measurement-shown'
import { Choice } from './choice'
import type { DeskStore } from './desk-store'
import type { DeskState } from './desk-state'
import type { Basis, ReadRedshifts, RedshiftDraft, Which } from './redshift-draft'

/** Redshifts of lens and source: the candidate's own, typed, or an assumed range that is marked so ever after. */
export function RedshiftFields({
  desk,
  state,
  read,
  known,
}: {
  desk: DeskStore
  state: DeskState
  read: ReadRedshifts
  /** Of known objects at the place. */
  known: CandidateMeasurements['knownRedshifts']
}) {
  return (
    <div className="flex flex-col gap-3">
      {(['lens', 'source'] as const).map((which) => (
        <RedshiftField
          key={which}
          which={which}
          draft={state.redshifts[which]}
          given={desk.given[which]}
          fault={read.faults[which] ?? null}
          known={which === 'lens' ? known : []}
          onChange={(change) =>
            desk.set({ redshifts: { ...state.redshifts, [which]: { ...state.redshifts[which], ...change } } })
          }
        />
      ))}
    </div>
  )
}

function RedshiftField({
  which,
  draft,
  given,
  fault,
  known,
  onChange,
}: {
  which: Which
  draft: RedshiftDraft
  given: number | null
  fault: string | null
  known: CandidateMeasurements['knownRedshifts']
  onChange: (change: Partial<RedshiftDraft>) => void
}) {
  const id = useId()
  const options: (readonly [Basis, string])[] = [
    ...(given !== null && given > 0 ? [['given', `${given}, given`] as const] : []),
    ['typed', 'Typed'],
    ['assumed', 'Assumed range'],
    ['unknown', 'Unknown'],
  ]
  const field = (name: 'value' | 'error' | 'low' | 'high', label: string) => (
    <label className="flex items-center gap-1.5 text-note text-mute">
      {label}
      <input
        inputMode="decimal"
        autoComplete="off"
        value={draft[name]}
        aria-label={`Redshift of the ${which}: ${NAMES[name]}`}
        aria-invalid={fault ? true : undefined}
        aria-describedby={fault ? `${id}-fault` : undefined}
        onChange={(event) => onChange({ [name]: event.target.value })}
        className="figures min-h-8 w-18 rounded-control border border-edge bg-well px-2 text-small text-text aria-invalid:border-alarm pointer-coarse:min-h-11"
      />
    </label>
  )
  return (
    <div className="flex flex-col gap-1.5">
      <Choice
        label={`Redshift of the ${which}`}
        options={options}
        value={draft.basis}
        onChange={(basis) => onChange({ basis })}
      />
      {known.map(({ name, redshift }) =>
        draft.basis === 'typed' && draft.value === String(redshift) ? null : (
          <TextButton
            key={`${name} ${redshift}`}
            onClick={() => onChange({ basis: 'typed', value: String(redshift), error: '' })}
          >
            Take {redshift}, of {name}
          </TextButton>
        ),
      )}
      {draft.basis === 'typed' ? (
        <div className="flex flex-wrap gap-3">
          {field('value', 'z')}
          {field('error', '±')}
        </div>
      ) : null}
      {draft.basis === 'assumed' ? (
        <div className="flex flex-wrap gap-3">
          {field('low', 'from')}
          {field('high', 'to')}
        </div>
      ) : null}
      {fault ? (
        <p id={`${id}-fault`} className="text-note text-alarm">
          {fault}
        </p>
      ) : null}
    </div>
  )
}

const NAMES = { value: 'value', error: 'error', low: 'from', high: 'to' }
