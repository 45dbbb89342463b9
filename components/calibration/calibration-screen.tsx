'use client'

import { useEffect, useState } from 'react'
import { FormSection } from '@/components/campaigns/form-section'
import { counted } from '@/components/campaigns/in-words'
import { PageHead } from '@/components/campaigns/page-head'
import { Button, ButtonLink } from '@/components/ui/button'
import { TextField } from '@/components/ui/field'
import { Notice } from '@/components/ui/notice'
import { USUAL_RANGES, type PaintingRanges } from '@/lib/science/lensing/painting/painting-ranges'
import type { CalibrationPage, Galaxy } from '@/lib/work/calibration/calibration-page'
import type { GalaxyFilter } from '@/lib/work/calibration/galaxy-filters'
import { askPage, Refused, sendOrder } from './calibration-api'
import { GalaxyChooser } from './galaxy-chooser'
import { PaintedTray } from './painted-tray'
import { PaintingWork } from './painting-work'
import { RangeFields } from './range-fields'
import { StampTable } from './stamp-table'
import { usePaintingPreview } from './use-painting-preview'

const PREVIEWED = 4
const LOOK_AGAIN_MS = 1500

/** Where a lead makes calibration stamps: choose galaxies, see the ranges and a few of what would come, make them. */
export function CalibrationScreen({
  slug,
  page: firstPage,
  first,
}: {
  slug: string
  page: CalibrationPage
  first: { which: GalaxyFilter; galaxies: Galaxy[] }
}) {
  const [page, setPage] = useState(firstPage)
  const [chosen, setChosen] = useState<ReadonlySet<number>>(new Set())
  const [ranges, setRanges] = useState<PaintingRanges>(USUAL_RANGES)
  const [seed, setSeed] = useState(1)
  const [numbers, setNumbers] = useState<{ lenses: number; others: number } | null>(null)
  const [trouble, setTrouble] = useState<Refused | Error | null>(null)
  const [sending, setSending] = useState(false)
  const half = Math.ceil(chosen.size / 2)
  const { lenses, others } = numbers ?? { lenses: half, others: chosen.size - half }
  const preview = usePaintingPreview(slug, ranges, [...chosen].slice(0, PREVIEWED), seed)
  const isBusy = page.work !== null || page.counts.waiting > 0
  useEffect(() => {
    if (!isBusy) return
    const timer = setInterval(() => void askPage(slug).then(setPage, () => {}), LOOK_AGAIN_MS)
    return () => clearInterval(timer)
  }, [slug, isBusy])

  const make = async () => {
    setSending(true)
    setTrouble(null)
    try {
      await sendOrder(slug, { ranges, galaxies: [...chosen], lenses, others, seed })
      setChosen(new Set())
      setNumbers(null)
      setSeed(seed + 1)
      setPage(await askPage(slug))
    } catch (error) {
      setTrouble(error instanceof Error ? error : new Error(String(error)))
    } finally {
      setSending(false)
    }
  }
  const { counts } = page
  const all = counts.lenses + counts.others
  const number = (text: string) => Math.max(0, Math.floor(Number(text) || 0))

  return (
    <div className="mx-auto flex max-w-6xl flex-col gap-8 px-5 py-8 md:px-10">
      <PageHead
        title={
          all === 0
            ? 'No calibration stamps yet'
            : `${counted(all, 'calibration stamp')}: ${counted(counts.lenses, 'lens', 'lenses')}, ${counted(counts.others, 'non-lens', 'non-lenses')}`
        }
        lead="Stamps of known truth, mixed into everybody’s queue and not to be told apart there, say how reliable each pair of eyes is. They serve practice too, and never enter a catalogue."
      >
        <ButtonLink href={`/campaigns/${slug}/settings#looking`}>Their share of the looks</ButtonLink>
      </PageHead>
      <PaintingWork page={page} />
      <FormSection
        title="Galaxies"
        about="Real galaxies of this campaign that are no lenses. Each is used once, turned or mirrored, so that nobody knows it again. Lens galaxies are mostly smooth and red: those look most natural painted over. What stays unpainted serves as a known non-lens, on your word."
      >
        <GalaxyChooser slug={slug} first={first} made={all} chosen={chosen} onChoose={setChosen} />
      </FormSection>
      <FormSection
        title="Lenses to paint"
        about="A blue source behind a singular isothermal ellipsoid with shear that follows the galaxy’s light, with the seeing and noise of the picture itself. Each value is drawn between its ends."
      >
        <RangeFields ranges={ranges} errors={preview.errors} onChange={setRanges} />
      </FormSection>
      <FormSection
        title="What would come"
        about="The first galaxies that you chose, painted over by these ranges. Nothing of it is kept."
      >
        {chosen.size === 0 ? (
          <p className="text-small text-mute">Choose a galaxy to see it painted over.</p>
        ) : (
          <>
            {preview.fault ? <Notice tone="alarm">{preview.fault}</Notice> : null}
            {preview.samples.length > 0 ? (
              <PaintedTray samples={preview.samples} pending={preview.pending} />
            ) : (
              <p role="status" className="text-small text-mute">
                {preview.fault ? '' : 'Painting…'}
              </p>
            )}
            <Button className="self-start" onClick={() => setSeed(seed + 1)}>
              Draw others
            </Button>
          </>
        )}
      </FormSection>
      <FormSection
        title="Make them"
        about="In the background. They get names like the survey’s own, positions nearby, and pictures by the recipe in force. Which of the chosen are painted is drawn by lot; for smooth galaxies with lenses and look-alikes without, make them in two goes."
      >
        <div className="flex flex-wrap items-start gap-4">
          <div className="w-40">
            <TextField
              label="Lenses"
              type="number"
              min={0}
              value={lenses}
              onChange={(event) => setNumbers({ lenses: number(event.target.value), others })}
            />
          </div>
          <div className="w-40">
            <TextField
              label="Non-lenses"
              type="number"
              min={0}
              value={others}
              onChange={(event) => setNumbers({ lenses, others: number(event.target.value) })}
            />
          </div>
        </div>
        {trouble ? <Notice tone="alarm">{sentenceOf(trouble)}</Notice> : null}
        <Button tone="lamp" className="self-start" disabled={sending || chosen.size === 0} onClick={() => void make()}>
          {chosen.size === 0 ? 'Choose galaxies first' : `Make ${counted(lenses + others, 'stamp')}`}
        </Button>
      </FormSection>
      {page.stamps.length > 0 ? (
        <section className="flex flex-col gap-3 border-t border-line pt-6">
          <h2 className="text-body font-semibold">What there is</h2>
          <StampTable slug={slug} stamps={page.stamps} />
        </section>
      ) : null}
    </div>
  )
}

function sentenceOf(trouble: Error): string {
  const fields = trouble instanceof Refused ? Object.values(trouble.fields) : []
  return fields.length > 0 ? fields.join(' ') : trouble.message
}
