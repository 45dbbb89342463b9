import { ButtonLink } from '@/components/ui/button'

/** For members of the campaign who read and do not grade. */
export function ClosedBench({ slug, campaignName }: { slug: string; campaignName: string }) {
  return (
    <main className="night grid min-h-dvh place-items-center bg-bench p-6 text-text">
      <div className="flex max-w-md flex-col items-start gap-4">
        <h1 className="text-display font-semibold">The bench is for graders</h1>
        <p className="text-mute">
          In {campaignName} you read the catalogue and its evidence. To grade, ask one of its leads to make you a
          grader.
        </p>
        <ButtonLink tone="lamp" href={`/campaigns/${slug}`}>
          To the campaign
        </ButtonLink>
      </div>
    </main>
  )
}
