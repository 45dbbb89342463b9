import { ButtonLink } from '@/components/ui/button'
import type { PracticeState } from '@/lib/work/calibration/practice'
import { ConfusionTable } from './confusion-table'

/** No stamp to show: there are none, or enough has been practised. */
export function PracticeEnd({ slug, state, lead }: { slug: string; state: PracticeState; lead: boolean }) {
  const none = state.stamps === 0
  return (
    <div className="grid min-h-0 flex-1 place-items-center overflow-y-auto p-6">
      <div className="flex max-w-lg flex-col items-start gap-4">
        <h1 className="text-display font-semibold">
          {none ? 'Nothing to practise on yet' : 'That was all there is to practise'}
        </h1>
        <p className="text-mute">
          {none
            ? lead
              ? 'Practice needs calibration stamps, whose truth is known. Paint some over the campaign’s own galaxies.'
              : 'Practice needs calibration stamps, whose truth is known. The leads of this campaign have not made any; you can grade without.'
            : 'The rest of the calibration stamps is kept to measure by: one that you have practised on never comes at the bench.'}
        </p>
        {state.own.answers > 0 ? (
          <ConfusionTable confusion={state.own} caption="Your answers in practice. Only you see them." />
        ) : null}
        <div className="flex flex-wrap gap-3">
          <ButtonLink
            tone="lamp"
            href={none && lead ? `/campaigns/${slug}/calibration` : `/campaigns/${slug}/bench`}
            prefetch={false}
          >
            {none && lead ? 'Make calibration stamps' : 'To the bench'}
          </ButtonLink>
          <ButtonLink href={`/campaigns/${slug}`}>To the campaign</ButtonLink>
        </div>
      </div>
    </div>
  )
}
