import { PageHead } from '@/components/campaigns/page-head'
import type { FormAction } from '@/components/people/use-kept-form'
import { ButtonLink } from '@/components/ui/button'
import { EmptyState } from '@/components/ui/notice'
import type { ReleaseKind } from '@/db/schema/releases'
import type { ReleasePreview } from '@/lib/work/releases/preview-release'
import { PublishForm } from './publish-form'
import { ReleasePreviewTray } from './release-preview'

export interface PublishScreenProps {
  home: string
  campaign: string
  survey: string
  year: number
  licences: { id: string; name: string }[]
  preview: ReleasePreview
  kind: ReleaseKind
  of: number | null
  action: FormAction
}

/** Prepares the next release: what would be in it, what has changed, and what it has to say of itself. */
export function PublishScreen(props: PublishScreenProps) {
  const { home, preview } = props
  const { number, beingMade } = preview
  return (
    <div className="mx-auto flex max-w-5xl flex-col gap-8 px-5 py-8 md:px-10">
      <PageHead
        title={`Release ${number} would be frozen as it is now`}
        lead="Grading goes on meanwhile. What is frozen never changes; nobody but leads and viewers reads it until you open it."
      />
      {beingMade === null ? (
        <>
          <ReleasePreviewTray home={home} preview={preview} />
          <PublishForm {...props} />
        </>
      ) : (
        <EmptyState title={`The files of release ${beingMade} are still being made`}>
          <p>The next release is compared with it, so it comes after.</p>
          <ButtonLink tone="lamp" href={`${home}/releases`}>
            See how far they are
          </ButtonLink>
        </EmptyState>
      )}
    </div>
  )
}
