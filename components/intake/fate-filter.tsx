import type { FileFate } from '@/db/schema/intake'
import type { IntakeSummary } from '@/lib/work/intake/delivered-file'

export const FATES: readonly FileFate[] = ['refused', 'stored', 'read', 'imaged', 'duplicate']

/** One button a fate with its count; the counts are the summary of the whole intake. */
export function FateFilter({
  summary,
  chosen,
  onChoose,
}: {
  summary: IntakeSummary
  chosen: FileFate | null
  onChoose: (fate: FileFate | null) => void
}) {
  const choices: { fate: FileFate | null; label: string; count: number }[] = [
    { fate: null, label: 'all', count: summary.files },
    ...FATES.map((fate) => ({ fate, label: fate as string, count: summary[fate] })),
  ]
  return (
    <div role="group" aria-label="Show files by fate" className="flex flex-wrap gap-1.5">
      {choices.map(({ fate, label, count }) => (
        <button
          key={label}
          type="button"
          aria-pressed={chosen === fate}
          onClick={() => onChoose(fate)}
          className="inline-flex min-h-8 items-center gap-2 pointer-coarse:min-h-11 rounded-control border border-edge/40 px-2.5 text-small text-mute hover:text-text aria-pressed:border-text aria-pressed:bg-raise aria-pressed:text-text"
        >
          {label}{' '}
          <span className={`figures text-note ${fate === 'refused' && count > 0 ? 'text-alarm' : ''}`}>
            {count.toLocaleString('en')}
          </span>
        </button>
      ))}
    </div>
  )
}
