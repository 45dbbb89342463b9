/** Redshifts as they are typed, and the choices that they come to. */
import { ASSUMED, RedshiftChoices, usedRedshift, type UsedRedshift } from '@/lib/work/measuring/redshift-choice'

export type Basis = 'unknown' | 'given' | 'typed' | 'assumed'

export interface RedshiftDraft {
  basis: Basis
  value: string
  error: string
  low: string
  high: string
}

export type Which = 'lens' | 'source'

/** The candidate's own where it has one. */
export function draftOf(which: Which, given: number | null): RedshiftDraft {
  const { low, high } = ASSUMED[which]
  return {
    basis: given !== null && given > 0 ? 'given' : 'unknown',
    value: '',
    error: '',
    low: String(low),
    high: String(high),
  }
}

/** What a kept measurement was worked out with, to go on from. */
export function draftFrom(which: Which, used: UsedRedshift | null, given: number | null): RedshiftDraft {
  const draft = draftOf(which, given)
  if (!used) return { ...draft, basis: 'unknown' }
  if (used.basis === 'assumed') return { ...draft, basis: 'assumed', low: String(used.low), high: String(used.high) }
  if (used.basis === 'given' && given === used.value) return draft
  return { ...draft, basis: 'typed', value: String(used.value), error: used.error === null ? '' : String(used.error) }
}

/** `0,45` is written in half of the world. NaN for what is no number. */
export const numberIn = (text: string): number => {
  const plain = text
    .trim()
    .replace(/−/g, '-')
    .replace(/^(-?\d*),(\d+)$/, '$1.$2')
  return plain === '' ? Number.NaN : Number(plain)
}

function choiceOf({ basis, value, error, low, high }: RedshiftDraft): unknown {
  if (basis === 'typed') return { basis, value: numberIn(value), error: error.trim() === '' ? null : numberIn(error) }
  if (basis === 'assumed') return { basis, low: numberIn(low), high: numberIn(high) }
  return { basis }
}

export interface ReadRedshifts {
  /** null where something is wrong with what was typed */
  choices: RedshiftChoices | null
  used: Record<Which, UsedRedshift | null>
  /** sentences by which of the two */
  faults: Partial<Record<Which, string>>
}

export function readRedshifts(
  drafts: Record<Which, RedshiftDraft>,
  given: Record<Which, number | null>,
): ReadRedshifts {
  const parsed = RedshiftChoices.safeParse({ lens: choiceOf(drafts.lens), source: choiceOf(drafts.source) })
  if (!parsed.success) {
    const faults: Partial<Record<Which, string>> = {}
    for (const { path, message } of parsed.error.issues) faults[path[0] as Which] ??= message
    return { choices: null, used: { lens: null, source: null }, faults }
  }
  const { lens, source } = parsed.data
  return {
    choices: parsed.data,
    used: { lens: usedRedshift(lens, given.lens), source: usedRedshift(source, given.source) },
    faults: {},
  }
}
