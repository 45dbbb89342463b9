import { ButtonLink } from '@/components/ui/button'

/** Instead of the bench, for a newcomer of whom the campaign asks practice. */
export function PracticeFirst({
  slug,
  campaignName,
  wanted,
  answered,
}: {
  slug: string
  campaignName: string
  wanted: number
  answered: number
}) {
  const left = wanted - answered
  return (
    <main className="night grid min-h-dvh place-items-center bg-bench p-6 text-text">
      <div className="flex max-w-md flex-col items-start gap-4">
        <h1 className="text-display font-semibold">
          {answered === 0 ? 'First a little practice' : `${left} more in practice, then the bench`}
        </h1>
        <p className="text-mute">
          {campaignName} asks newcomers to practise on {wanted} {wanted === 1 ? 'stamp' : 'stamps'} whose truth is
          known. After each you see what it was. Your answers count nowhere and nobody else sees them.
        </p>
        <div className="flex flex-wrap gap-3">
          <ButtonLink tone="lamp" href={`/campaigns/${slug}/practice`} prefetch={false}>
            {answered === 0 ? 'Begin' : 'Go on'}
          </ButtonLink>
          <ButtonLink href={`/campaigns/${slug}`}>To the campaign</ButtonLink>
        </div>
      </div>
    </main>
  )
}
