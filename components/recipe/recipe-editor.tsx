'use client'

import { useRouter } from 'next/navigation'
import { useState, type ReactNode } from 'react'
import { counted } from '@/components/campaigns/in-words'
import { Button } from '@/components/ui/button'
import { EmptyState, Notice } from '@/components/ui/notice'
import { defaultRecipe, type Recipe } from '@/lib/science/imaging/recipe'
import type { RecipeVersion } from '@/lib/work/stamps/recipe-versions'
import { PreviewTray } from './preview-tray'
import { possibleViews, sameRecipe, wholeRecipe } from './recipe-draft'
import { FieldOfView, LimitFields, WeightFields } from './recipe-fields'
import { RecipeHistory } from './recipe-history'
import { Refused, saveRecipe } from './recipe-api'
import { SampleChooser, type Sample } from './sample-chooser'
import { usePreview } from './use-preview'
import { ViewList } from './view-list'

export interface RecipeEditorProps {
  slug: string
  bands: string[]
  versions: RecipeVersion[]
  firstSamples: Sample[]
  mostSamples: number
}

interface Said {
  done?: string
  fault?: string
  errors?: Record<string, string>
}

/** The recipe at the left, the campaign's own candidates drawn by it at the right, its history below. */
export function RecipeEditor({ slug, bands, versions, firstSamples, mostSamples }: RecipeEditorProps) {
  const router = useRouter()
  const inForce = versions[0]
  const [draft, setDraft] = useState(() => wholeRecipe(inForce.recipe, bands))
  const [view, setView] = useState(draft.views[0])
  const [samples, setSamples] = useState(firstSamples)
  const [close, setClose] = useState(false)
  const [comparing, setComparing] = useState(false)
  const [said, setSaid] = useState<Said>({})
  const [busy, setBusy] = useState(false)
  const ids = samples.map(({ id }) => id)
  const old = wholeRecipe(inForce.recipe, bands)
  // Every view is drawn, so that one that is not shown can be tried before it is.
  const withAll = (recipe: Recipe) => ({ ...recipe, views: possibleViews(recipe, bands).map(({ key }) => key) })
  const preview = usePreview(slug, withAll(draft), ids)
  const before = usePreview(slug, withAll(old), ids)
  const changed = !sameRecipe(draft, old)
  const errors = { ...preview.errors, ...said.errors }
  const label = possibleViews(draft, bands).find(({ key }) => key === view)?.label ?? ''
  const shown = comparing ? before : preview

  const edit = (recipe: Recipe) => {
    setDraft(wholeRecipe(recipe, bands))
    setSaid({})
  }
  const save = async (change: { recipe: Recipe } | { again: number; recipe: Recipe }) => {
    setBusy(true)
    setSaid({})
    const after = inForce.version
    try {
      const body = 'again' in change ? { after, again: change.again } : { after, recipe: change.recipe }
      const { version } = await saveRecipe(slug, body)
      setDraft(wholeRecipe(change.recipe, bands))
      setSaid({ done: `Version ${version} is in force. All pictures are made by it now.` })
      router.refresh()
    } catch (error) {
      const errors = error instanceof Refused ? error.fields : {}
      setSaid({ fault: error instanceof Error ? error.message : String(error), errors })
    }
    setBusy(false)
  }

  return (
    <div className="flex flex-col gap-8">
      <div className="flex flex-col gap-6 lg:grid lg:grid-cols-[23rem_minmax(0,1fr)] lg:items-start lg:gap-8">
        <div className="flex min-w-0 flex-col gap-6">
          <Part title="Views">
            <ViewList recipe={draft} bands={bands} chosen={view} onChoose={setView} onChange={edit} />
            {errors.views ? <p className="text-note text-alarm">{errors.views}</p> : null}
          </Part>
          <Part title={`Brightness of ${label}`} about="In units of the sky noise σ, counted from the sky.">
            <LimitFields recipe={draft} errors={errors} onChange={edit} view={view} />
          </Part>
          {bands.length > 1 ? (
            <Part title="Weights of the bands" about="Where bands are mixed to colour.">
              <WeightFields recipe={draft} errors={errors} onChange={edit} bands={bands} />
            </Part>
          ) : null}
          <Part title="Field and direction">
            <FieldOfView recipe={draft} errors={errors} onChange={edit} />
          </Part>
        </div>
        <div className="contents min-w-0 flex-col gap-4 lg:sticky lg:top-6 lg:flex">
          {samples.length > 0 ? (
            <>
              <SampleChooser slug={slug} samples={samples} most={mostSamples} onChange={setSamples} />
              <PreviewTray
                wanted={samples}
                samples={shown.samples}
                view={view}
                fieldArcsec={close ? (comparing ? old : draft).closeFieldArcsec : null}
                pending={shown.pending}
                onChoose={setView}
              />
              <div className="flex flex-wrap items-center gap-x-5 gap-y-2">
                <label className="flex min-h-8 items-center gap-2.5 text-small">
                  <input
                    type="checkbox"
                    checked={close}
                    onChange={(event) => setClose(event.target.checked)}
                    className="size-5 accent-lamp"
                  />
                  Show the close field
                </label>
                <Button
                  disabled={!changed}
                  aria-pressed={comparing}
                  onClick={() => setComparing(!comparing)}
                  className="aria-pressed:border-lamp"
                >
                  {comparing ? `Version ${inForce.version} is shown` : `Compare with version ${inForce.version}`}
                </Button>
              </div>
              {preview.fault ? <Notice tone="alarm">{preview.fault}</Notice> : null}
            </>
          ) : (
            <EmptyState title="Nothing to try it on yet">
              <p>Send cutouts on the intake page first. The recipe can be changed without, but not seen.</p>
            </EmptyState>
          )}
          <div className="flex flex-wrap items-center gap-3 border-t border-line pt-4">
            <Button tone="lamp" disabled={!changed || busy} onClick={() => void save({ recipe: draft })}>
              {busy ? 'Saving…' : 'Save as a new version'}
            </Button>
            <Button tone="bare" disabled={!changed || busy} onClick={() => edit(inForce.recipe)}>
              Back to version {inForce.version}
            </Button>
            <Button tone="bare" disabled={busy} onClick={() => edit(defaultRecipe(bands))}>
              Ringside’s own
            </Button>
          </div>
          {said.done ? <Notice tone="done">{said.done}</Notice> : null}
          {said.fault ? <Notice tone="alarm">{said.fault}</Notice> : null}
        </div>
      </div>
      <Part title="Its history" about={`${counted(versions.length, 'version')}, newest first.`}>
        <RecipeHistory
          versions={versions}
          bands={bands}
          busy={busy}
          onLook={({ recipe }) => edit(recipe)}
          onAgain={({ version, recipe }) => void save({ again: version, recipe })}
        />
      </Part>
    </div>
  )
}

function Part({ title, about, children }: { title: string; about?: string; children: ReactNode }) {
  return (
    <section className="flex flex-col gap-3 border-t border-line pt-4">
      <div>
        <h2 className="text-body font-semibold">{title}</h2>
        {about ? <p className="text-note text-mute">{about}</p> : null}
      </div>
      {children}
    </section>
  )
}
