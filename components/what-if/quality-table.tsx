import { counted } from '@/components/campaigns/in-words'
import type { Interval } from '@/lib/science/agreement/binomial-intervals'
import type { RuleTrial } from '@/lib/work/consensus/try-rule'

/** `94.1 %`; one decimal, since a point matters near the ends. */
export const share = (value: number | null | undefined): string =>
  value === null || value === undefined ? '–' : `${(100 * value).toFixed(1)} %`

const range = (interval: Interval | null | undefined) =>
  interval ? `${(100 * interval.low).toFixed(0)} to ${(100 * interval.high).toFixed(0)} %` : null

function Cell({ value, below }: { value: string; below?: string | null }) {
  return (
    <td className="py-1.5 pr-4 align-top">
      <span className="figures text-title font-semibold whitespace-nowrap">{value}</span>
      {below ? <span className="block text-note text-mute">{below}</span> : null}
    </td>
  )
}

/** Completeness and purity of the catalogue that the rule would make: what stamps show, and what the model promises. */
export function QualityTable({ trial, lensShare }: { trial: RuleTrial; lensShare: number | null }) {
  const { quality, counts, waiting } = trial.stamps
  const stamps = counts.lenses + counts.nonLenses
  const wanting = `${counted(waiting, 'calibration stamp')} ${waiting === 1 ? 'wants' : 'want'} more looks`
  const none = trial.promised?.purity === null ? 'nothing would be confirmed' : null
  return (
    <section aria-label="Completeness and purity" className="flex flex-col gap-2">
      <table className="w-full border-collapse text-left">
        <thead className="text-note text-mute">
          <tr>
            <th scope="col" className="pr-4 font-normal">
              <span className="sr-only">Quality</span>
            </th>
            <th scope="col" className="pr-4 font-normal">
              by calibration stamps
            </th>
            <th scope="col" className="pr-4 font-normal">
              by lens probabilities
            </th>
          </tr>
        </thead>
        <tbody>
          <tr className="border-t border-line">
            <th scope="row" className="py-2 pr-4 align-top text-small font-semibold">
              Completeness
            </th>
            <Cell value={share(quality?.completeness.value)} below={range(quality?.completeness.interval)} />
            <Cell value={share(trial.promised?.completeness)} below="of the lenses are confirmed" />
          </tr>
          <tr className="border-t border-line">
            <th scope="row" className="py-2 pr-4 align-top text-small font-semibold">
              Purity
            </th>
            <Cell value={share(quality?.purity.value)} below={range(quality?.purity.interval)} />
            <Cell value={share(trial.promised?.purity)} below={none ?? 'of the confirmed are lenses'} />
          </tr>
        </tbody>
      </table>
      <p className="text-note text-mute">
        {stamps > 0 && quality ? (
          <>
            Confirmed of the stamps: {counts.lensesConfirmed} of {counts.lenses} lenses, {counts.nonLensesConfirmed} of{' '}
            {counts.nonLenses} that are none. Each is stopped at the look at which the rule would stop a candidate, and
            weighed without what it taught of its graders.
            {waiting > 0
              ? ` ${wanting} and are in none of these numbers, which are of those quick to decide.`
              : ''}{' '}
            Intervals hold 95 %. Purity is for {share(lensShare)} lenses among the candidates.
          </>
        ) : stamps + waiting > 0 ? (
          <>{wanting} before this rule would stop. Have them graded, and the left column fills.</>
        ) : (
          <>
            This campaign has no calibration stamps, so nothing here is measured against a known truth. Put some among
            the candidates: with 30 lenses and 30 others the intervals are about 15 points wide each way.
          </>
        )}{' '}
        The right column is what the model promises if its probabilities are right, of the grades given so far: what is
        open is not confirmed. {quality ? 'The left one is of candidates that have all the looks they want.' : null}
      </p>
    </section>
  )
}
