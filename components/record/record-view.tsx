import { FormSection } from '@/components/campaigns/form-section'
import { counted } from '@/components/campaigns/in-words'
import { PageHead } from '@/components/campaigns/page-head'
import { ConfusionTable, rateInWords } from '@/components/practice/confusion-table'
import { ButtonLink } from '@/components/ui/button'
import { EmptyState } from '@/components/ui/notice'
import type { GraderRecord } from '@/lib/work/calibration/grader-record'
import { GradeBars } from './grade-bars'

/** A grader's own page, or that of another for a lead's eyes: counts, pace, self-consistency, calibration. No ranking. */
export function RecordView({
  slug,
  record,
  own,
  graders,
}: {
  slug: string
  record: GraderRecord
  own: boolean
  /** For leads: everybody who grades. */
  graders: { id: number; name: string; ended: 0 | 1 }[] | null
}) {
  const { looks, late, days, medianSeconds, consistency, calibration, practice } = record
  const whose = own ? 'you' : record.person.name
  const home = `/campaigns/${slug}`
  return (
    <div className="mx-auto flex max-w-6xl flex-col gap-8 px-5 py-8 md:px-10">
      <PageHead
        title={
          own
            ? `You have graded ${counted(looks, 'candidate')}`
            : `${record.person.name} has graded ${counted(looks, 'candidate')}`
        }
        lead={
          own
            ? 'This page is yours: other graders do not see it. Leads of the campaign see it but for your answers in practice.'
            : 'Answers in practice are the grader’s own and are not shown.'
        }
      />
      {looks + late === 0 ? (
        <EmptyState title={own ? 'Nothing graded yet' : `Nothing graded by ${record.person.name} yet`}>
          <p>Counts, pace and calibration results gather here with the first looks.</p>
          {own ? (
            <ButtonLink href={`${home}/bench`} prefetch={false}>
              To the bench
            </ButtonLink>
          ) : null}
        </EmptyState>
      ) : (
        <>
          <FormSection title="Grades" about="First grades as they stand.">
            <GradeBars grades={record.grades} />
            {late > 0 ? (
              <p className="mt-3 text-small text-mute">
                {counted(late, 'more look')} came when {late === 1 ? 'its candidate' : 'their candidates'} had all that{' '}
                {late === 1 ? 'it wants' : 'they want'}. Kept, and counted in no verdict.
              </p>
            ) : null}
          </FormSection>
          <FormSection title="Pace" about="Of the newest 500 looks. Neither quick nor slow is good in itself.">
            <p>
              {medianSeconds === null ? (
                'No look has told how long it took.'
              ) : (
                <>
                  Half of {own ? 'your' : 'their'} looks take less than{' '}
                  <span className="figures">{medianSeconds.toFixed(1)} s</span>.
                </>
              )}
            </p>
            <DayTable days={days} />
          </FormSection>
        </>
      )}
      <FormSection
        title="Self-consistency"
        about="Candidates that come back turned or mirrored at least 20 looks later. They count in no verdict."
      >
        {consistency.pairs === 0 ? (
          <p className="text-mute">No candidate has come back to {whose} yet.</p>
        ) : (
          <dl className="grid max-w-xl gap-x-6 gap-y-1 sm:grid-cols-[auto_1fr]">
            <dt className="text-mute">The same grade again</dt>
            <dd className="figures">{rateInWords(consistency.same)}</dd>
            <dt className="text-mute">At most one letter apart</dt>
            <dd className="figures">{rateInWords(consistency.near)}</dd>
            <dt className="text-mute">Weighted kappa</dt>
            <dd className="figures">
              {consistency.kappa === null
                ? 'undefined: all in one letter'
                : consistency.kappa.toFixed(2).replace('-', '−')}
            </dd>
          </dl>
        )}
      </FormSection>
      <FormSection
        title="Calibration"
        about={`Stamps of known truth that were mixed in at the bench, as they were answered first.${own ? ' They are told five at a time, so that none can be told apart.' : ''}`}
      >
        {calibration.answers === 0 ? (
          <p className="text-mute">
            {record.notYet
              ? 'The first results come with a few more looks.'
              : 'No calibration stamp has been told yet.'}
          </p>
        ) : (
          <ConfusionTable confusion={calibration} caption={`${counted(calibration.answers, 'answer')} at the bench`} />
        )}
      </FormSection>
      {practice && practice.answers > 0 ? (
        <FormSection title="Practice" about="Your answers, which count nowhere. Nobody else sees them, leads neither.">
          <ConfusionTable confusion={practice} caption={`${counted(practice.answers, 'answer')} in practice`} />
        </FormSection>
      ) : null}
      {graders ? (
        <FormSection title="Everybody who grades" about="For leads only.">
          <ul className="flex flex-wrap gap-2">
            {graders.map(({ id, name, ended }) => (
              <li key={id}>
                <ButtonLink href={`${home}/people/${id}`} aria-current={id === record.person.id ? 'page' : undefined}>
                  {name}
                  {ended ? ' (left)' : ''}
                </ButtonLink>
              </li>
            ))}
          </ul>
        </FormSection>
      ) : null}
    </div>
  )
}

function DayTable({ days }: { days: GraderRecord['days'] }) {
  const most = Math.max(1, ...days.map(({ n }) => n))
  return (
    <table className="w-full max-w-md text-small">
      <caption className="pb-1 text-left text-note text-mute">Looks a day, UTC, the newest first</caption>
      <thead className="sr-only">
        <tr>
          <th scope="col">Day</th>
          <th scope="col">Looks</th>
        </tr>
      </thead>
      <tbody>
        {days.slice(0, 14).map(({ day, n }) => (
          <tr key={day}>
            <th scope="row" className="figures w-28 py-0.5 text-left font-normal text-mute">
              {day}
            </th>
            <td className="figures py-0.5">
              <span className="flex items-center gap-2">
                <i
                  aria-hidden="true"
                  className="block h-2 bg-grade-b"
                  style={{ width: `${Math.max(1, (70 * n) / most)}%` }}
                />
                {n}
              </span>
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  )
}
