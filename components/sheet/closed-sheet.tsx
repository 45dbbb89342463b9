import { ButtonLink } from '@/components/ui/button'

/** Where there is no first pass to make, or not for this person. */
export function ClosedSheet({
  slug,
  campaignName,
  usesSheet,
  lead,
}: {
  slug: string
  campaignName: string
  usesSheet: boolean
  lead: boolean
}) {
  return (
    <main className="night grid min-h-dvh place-items-center bg-bench p-6 text-text">
      <div className="flex max-w-md flex-col items-start gap-4">
        <h1 className="text-display font-semibold">
          {usesSheet ? 'The first pass is made by others' : 'No first pass here'}
        </h1>
        <p className="text-mute">
          {usesSheet
            ? `In ${campaignName} the leads have picked who makes it. What they send on comes to the bench.`
            : `${campaignName} sends every candidate to the bench.${lead ? ' You can turn the first pass on in the settings.' : ''}`}
        </p>
        <ButtonLink tone="lamp" href={!usesSheet && lead ? `/campaigns/${slug}/settings` : `/campaigns/${slug}`}>
          {!usesSheet && lead ? 'To the settings' : 'To the campaign'}
        </ButtonLink>
      </div>
    </main>
  )
}
