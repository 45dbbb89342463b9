import type { UsedRedshift } from '@/lib/work/measuring/redshift-choice'

/** `redshift 0.45 ± 0.01, typed`; `redshift 0.2 to 0.8, assumed`. */
export function redshiftInWords(used: UsedRedshift | null): string {
  if (!used) return 'redshift unknown'
  const { basis, value, error, low, high } = used
  if (basis === 'assumed') return `redshift ${low} to ${high}, assumed`
  return `redshift ${value}${error === null ? '' : ` ± ${error}`}, ${basis === 'given' ? 'the candidate’s own' : 'typed'}`
}

export const KIND_WORDS = { circle: 'circle', ellipse: 'ellipse', model: 'lens model' } as const
