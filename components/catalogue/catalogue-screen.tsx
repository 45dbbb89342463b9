import type { ViewsOfTable } from '@/components/table/saved-views'
import { ButtonLink } from '@/components/ui/button'
import { EmptyState, Notice, VisualGradeCaution } from '@/components/ui/notice'
import type { CatalogueTable as Catalogue } from '@/lib/work/catalogue/catalogue-table'
import { CatalogueTable } from './catalogue-table'
import { HeldBack } from './held-back'

interface CatalogueScreenProps {
  slug: string
  catalogue: Catalogue
  /** How the class comes about, in words. */
  classRule: string
  /** Where to go when nothing is confirmed yet. */
  next: { href: string; label: string }
  views?: ViewsOfTable
}

export function CatalogueScreen({ slug, catalogue, classRule, next, views }: CatalogueScreenProps) {
  const { all, ownOnly } = catalogue
  if (all === 0) {
    return (
      <div className="flex flex-col gap-4 px-4 py-6 md:px-6">
        <h1 className="text-title font-semibold">Catalogue</h1>
        <EmptyState title={ownOnly ? 'Nothing that you have graded is confirmed yet' : 'Nothing is confirmed yet'}>
          {ownOnly ? (
            <p>Confirmed candidates that you have not graded are held back, so that nobody’s judgement sways yours.</p>
          ) : null}
          <p>
            A candidate enters the catalogue when its grades confirm it under the rule of the campaign, or when a lead
            rules so. It then gets its designation, and the list can be downloaded as CSV and VOTable.
          </p>
          <ButtonLink tone="lamp" href={next.href}>
            {next.label}
          </ButtonLink>
        </EmptyState>
      </div>
    )
  }
  return (
    <div className="flex flex-col gap-3 px-4 py-4 md:h-dvh md:px-6 md:py-5">
      <header className="flex flex-wrap items-start gap-x-6 gap-y-3">
        <div className="mr-auto">
          <h1 className="text-title font-semibold">
            {all.toLocaleString('en')} confirmed {all === 1 ? 'candidate' : 'candidates'}
            {ownOnly ? ' that you have graded' : ''}
          </h1>
          <VisualGradeCaution />
          <p className="text-note text-mute">Class: {classRule}.</p>
        </div>
        {catalogue.mayExport ? <Downloads slug={slug} count={all} /> : null}
      </header>
      {ownOnly ? <HeldBack slug={slug} /> : null}
      {catalogue.mayExport || ownOnly ? null : (
        <Notice>Files of the catalogue are downloaded by leads and viewers; ask one of them for it.</Notice>
      )}
      <div className="flex flex-col md:min-h-0 md:flex-1">
        <CatalogueTable slug={slug} catalogue={catalogue} views={views} />
      </div>
    </div>
  )
}

function Downloads({ slug, count }: { slug: string; count: number }) {
  const about = `all ${count.toLocaleString('en')} entries, whatever the table shows`
  return (
    <div className="flex gap-2">
      <ButtonLink prefetch={false} download href={`/api/campaigns/${slug}/catalogue.csv`} title={`CSV: ${about}`}>
        Download CSV
      </ButtonLink>
      <ButtonLink
        tone="lamp"
        prefetch={false}
        download
        href={`/api/campaigns/${slug}/catalogue.vot`}
        title={`VOTable 1.4 with units and UCDs: ${about}`}
      >
        Download VOTable
      </ButtonLink>
    </div>
  )
}
