import type { Confusion, Rate } from '@/lib/work/calibration/confusion'

const LETTERS = ['A', 'B', 'C', 'N', 'U'] as const
const percent = (share: number) => `${Math.round(100 * share)} %`

export function rateInWords({ n, of, share, interval }: Rate): string {
  if (share === null || interval === null) return 'none yet'
  return `${n} of ${of}, ${percent(share)} (${percent(interval.low)} to ${percent(interval.high)})`
}

/** Answers against truth: a small table, and the two shares that matter, with their intervals. */
export function ConfusionTable({ confusion, caption }: { confusion: Confusion; caption: string }) {
  const rows = [
    { truth: 'Lens', counts: confusion.lens },
    { truth: 'Not a lens', counts: confusion.notLens },
  ]
  return (
    <div className="flex flex-col gap-3">
      <table className="w-full max-w-md border-collapse text-small">
        <caption className="pb-2 text-left text-note text-mute">{caption}</caption>
        <thead>
          <tr className="border-b border-line text-note text-mute">
            <th scope="col" className="py-1 pr-3 text-left font-normal">
              Truth
            </th>
            {LETTERS.map((letter) => (
              <th key={letter} scope="col" className="w-12 py-1 text-right font-semibold">
                {letter === 'U' ? <abbr title="U, cannot judge">U</abbr> : letter}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map(({ truth, counts }) => (
            <tr key={truth} className="border-b border-line">
              <th scope="row" className="py-1.5 pr-3 text-left font-normal">
                {truth}
              </th>
              {counts.map((n, k) => (
                <td key={LETTERS[k]} className={`figures py-1.5 text-right ${n === 0 ? 'text-mute' : ''}`}>
                  {n}
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
      <dl className="grid max-w-md gap-x-4 gap-y-1 text-small sm:grid-cols-[auto_1fr]">
        <dt className="text-mute">Lenses graded A, B or C</dt>
        <dd className="figures">{rateInWords(confusion.lensesSeen)}</dd>
        <dt className="text-mute">Non-lenses graded N</dt>
        <dd className="figures">{rateInWords(confusion.othersSeen)}</dd>
      </dl>
      <p className="max-w-md text-note text-mute">
        In brackets Wilson’s interval at 95 %. ‘Cannot judge’ is in no share.
      </p>
    </div>
  )
}
