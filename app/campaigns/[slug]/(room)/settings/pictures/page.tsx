import type { Metadata } from 'next'
import { permitPage } from '@/app/_lib/page-permit'
import { PageHead } from '@/components/campaigns/page-head'
import { ImagingProgress } from '@/components/recipe/imaging-progress'
import { RecipeEditor } from '@/components/recipe/recipe-editor'
import { ButtonLink } from '@/components/ui/button'
import { fromJson } from '@/db/schema/values'
import { findSamples, MOST_SAMPLES } from '@/lib/work/stamps/preview-recipe'
import { listRecipeVersions, recipeProgress } from '@/lib/work/stamps/recipe-versions'

export const metadata: Metadata = { title: 'Pictures' }

const FIRST_SAMPLES = 3

export default async function PicturesPage({ params }: PageProps<'/campaigns/[slug]/settings/pictures'>) {
  const { slug } = await params
  const { db, permit } = await permitPage(slug, 'lead', '/settings/pictures')
  const versions = await listRecipeVersions(db, permit)
  const progress = await recipeProgress(db, permit)
  return (
    <div className="mx-auto flex max-w-7xl flex-col gap-7 px-5 py-8 md:px-10">
      <PageHead
        title={`Pictures are made by version ${versions[0].version} of the recipe`}
        lead="A change is added as a new version and all pictures are made anew. Every grade remembers the version of the pictures it was given on."
      >
        <ButtonLink href={`/campaigns/${slug}/settings`}>All settings</ButtonLink>
      </PageHead>
      <ImagingProgress slug={slug} first={progress} />
      <RecipeEditor
        slug={slug}
        bands={fromJson(permit.campaign.bands)}
        versions={versions}
        firstSamples={await findSamples(db, permit, { name: null, count: FIRST_SAMPLES })}
        mostSamples={MOST_SAMPLES}
      />
    </div>
  )
}
