import type { RunSummary } from '@/db/schema/consensus'
import { counted, moment } from './in-words'

/** A coefficient on the line from chance to full agreement. Below chance it stands at the left end; the number says it. */
function Scale({ value }: { value: number }) {
  const place = Math.min(1, Math.max(0, value))
  return (
    <div className="flex flex-col gap-1" aria-hidden="true">
      <div className="relative h-1.5 rounded-full bg-line">
        <i
          className="absolute top-1/2 size-3 -translate-x-1/2 -translate-y-1/2 rounded-full bg-grade-a ring-2 ring-page"
          style={{ left: `${place * 100}%` }}
        />
      </div>
      <div className="flex justify-between text-note text-mute">
        <span>0 chance</span>
        <span>1 full agreement</span>
      </div>
    </div>
  )
}

/** The bounds 0.80 and 0.67 are the ones commonly quoted after Krippendorff's book; from memory. */
export function alphaMeaning(alpha: number): string {
  if (alpha >= 0.8) return 'Commonly taken as reliable (0.80 and up).'
  if (alpha >= 0.67) return 'Commonly taken as enough for tentative conclusions (0.67 to 0.80).'
  if (alpha > 0) return 'Better than chance, below the 0.67 commonly taken as the least.'
  return 'No better than chance. Look at the splits together and agree on what each grade means.'
}

function Coefficient({
  name,
  value,
  note,
  meaning,
}: {
  name: string
  value: number | null
  note: string | null
  meaning: string
}) {
  return (
    <div className="flex flex-col gap-2">
      <h3 className="text-small text-mute">{name}</h3>
      {value === null ? (
        <p className="text-small">{note ?? 'Not to be computed yet.'}</p>
      ) : (
        <>
          <p className="figures text-display font-semibold leading-none">{value.toFixed(2).replace('-', '−')}</p>
          <Scale value={value} />
          <p className="text-note text-mute">{meaning}</p>
        </>
      )}
    </div>
  )
}

/** How far the graders agree, by the newest run. */
export function Agreement({ run }: { run: { at: string; summary: RunSummary } }) {
  const { summary } = run
  return (
    <div className="flex flex-col gap-4">
      <div className="grid gap-8 sm:grid-cols-2">
        <Coefficient
          name="Krippendorff’s alpha, ordinal"
          value={summary.alphaOrdinal}
          note={summary.alphaNote}
          meaning={`A against B weighs less than A against N. ${summary.alphaOrdinal === null ? '' : alphaMeaning(summary.alphaOrdinal)}`}
        />
        <Coefficient
          name="Fleiss’ kappa"
          value={summary.fleissKappa}
          note={summary.kappaNote}
          meaning="Counts only whether the letters are the same, so for ordered grades it is usually the lower of the two."
        />
      </div>
      <p className="text-note text-mute">
        From {counted(summary.grades, 'grade')} by {counted(summary.graders, 'person', 'people')}, in the consensus run
        of {moment(run.at)}.
      </p>
    </div>
  )
}
