import { PageHead } from '@/components/campaigns/page-head'
import { counted } from '@/components/campaigns/in-words'
import type { FormAction } from '@/components/people/use-kept-form'
import { ButtonLink } from '@/components/ui/button'
import { EmptyState, VisualGradeCaution } from '@/components/ui/notice'
import type { ListedRelease } from '@/lib/work/releases/list-releases'
import { ReleaseCard } from './release-card'

export interface ShownRelease extends ListedRelease {
  accessAction: FormAction
  againAction: FormAction
  giveUpAction: FormAction
}

/** Every release of the campaign, newest first, with its files and who may read it. */
export function ReleasesScreen({
  slug,
  acronym,
  releases,
  mayPublish,
}: {
  slug: string
  acronym: string
  releases: ShownRelease[]
  mayPublish: boolean
}) {
  const publish = `/campaigns/${slug}/releases/new`
  const next = (releases[0]?.number ?? 0) + 1
  const isBusy = releases.some(({ making }) => making !== null)
  return (
    <div className="mx-auto flex max-w-5xl flex-col gap-8 px-5 py-8 md:px-10">
      <PageHead
        title={releases.length === 0 ? 'Nothing is released yet' : counted(releases.length, 'release')}
        lead={
          <>
            <p>
              A release is a frozen, numbered copy of the catalogue with every grade it rests on. It never changes: a
              correction is a new release, and the old one then says so.
            </p>
            <VisualGradeCaution />
          </>
        }
      >
        {mayPublish && releases.length > 0 && !isBusy ? (
          <ButtonLink tone="lamp" href={publish}>
            Prepare release {next}
          </ButtonLink>
        ) : null}
      </PageHead>
      {releases.length === 0 ? (
        <EmptyState title="What others can cite and recompute">
          <p>
            Publishing freezes the catalogue, the grades under pseudonyms, the rule and the pictures, and makes files of
            them: CSV, VOTable, JSON, and one archive from which anybody can recompute every verdict. You then decide
            who may read it.
          </p>
          {mayPublish ? (
            <ButtonLink tone="lamp" href={publish}>
              Prepare release 1
            </ButtonLink>
          ) : (
            <p>A lead of this campaign publishes; the releases then stand here.</p>
          )}
        </EmptyState>
      ) : null}
      <ol className="flex flex-col gap-10">
        {releases.map((release) => (
          <ReleaseCard
            key={release.number}
            slug={slug}
            acronym={acronym}
            release={release}
            mayChange={mayPublish}
            isBusy={isBusy}
          />
        ))}
      </ol>
    </div>
  )
}
