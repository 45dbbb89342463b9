'use client'

import { useState, type ReactNode } from 'react'
import type { LightStore } from '@/components/light/light-store'
import { Button } from '@/components/ui/button'
import type { CandidateMeasurements } from '@/lib/work/measuring/measurement-shown'
import type { CandidatePictures, PictureView } from '@/lib/work/stamps/candidate-pictures'
import type { DeskStore } from './desk-store'
import { wideTransform } from './frame'
import { MeasureLayer } from './measure-layer'
import { MeasurementList, type WithdrawAction } from './measurement-list'
import { MeasurePanel } from './measure-panel'
import type { SaveAction } from './save-measurement'
import { useDeskStore, useMode, useWide } from './use-desk'

/** What a page needs to let people measure; null where the reader may not see yet what others made of the candidate. */
export interface Measuring {
  measurements: CandidateMeasurements
  /** null: reads only. */
  save: SaveAction | null
  withdraw: WithdrawAction | null
}

export interface EvidenceDesk {
  measuring: boolean
  /** For the tray of views. */
  over: { layer: (view: PictureView) => ReactNode; transform?: string }
  /** Beside the picture while somebody measures. */
  panel: ReactNode
  /** Under the picture, before anybody measures. */
  starts: ReactNode
  /** Among the evidence. */
  list: ReactNode
}

const NOTHING: CandidateMeasurements = {
  standing: [],
  earlier: [],
  combined: null,
  mayMeasure: false,
  alone: false,
  cosmology: {
    name: '',
    hubble: 70,
    omegaMatter: 0.3,
    temperatureK: 0,
    neutrinoSpecies: 0,
    neutrinoMassesEv: [],
    reference: '',
  },
  lensRedshift: null,
  sourceRedshift: null,
  knownRedshifts: [],
}

/** The parts of measuring on the page of a candidate: over the picture, beside it and in its column. */
export function useEvidenceDesk(
  measuring: Measuring | null,
  pictures: CandidatePictures,
  light: LightStore,
  { shown: viewShown, onChoose }: { shown: number; onChoose: (index: number) => void },
): EvidenceDesk {
  const view: PictureView | undefined = pictures.views[viewShown]
  const measurements = measuring?.measurements ?? NOTHING
  const { lensRedshift: lens, sourceRedshift: source } = measurements
  const desk = useDeskStore({ lens, source }, pictures.closeFieldArcsec)
  const mode = useMode(desk)
  const wide = useWide(desk)
  const [shownIds, setShownIds] = useState<readonly number[]>([])
  const shown = measurements.standing.filter(({ id }) => shownIds.includes(id))
  const save = measuring?.save
  return {
    measuring: mode !== 'off',
    over: {
      layer: (one) => (
        <MeasureLayer desk={desk} light={light} view={one} closeFieldArcsec={pictures.closeFieldArcsec} shown={shown} />
      ),
      transform: wideTransform(wide),
    },
    panel:
      measuring && view && mode !== 'off' ? (
        <MeasurePanel
          desk={desk}
          light={light}
          view={view}
          views={pictures.views}
          onView={onChoose}
          measurements={measurements}
          onSave={save ?? (async () => ({ message: 'You may read here and not measure.' }))}
        />
      ) : null,
    starts: save && mode === 'off' ? <Starts desk={desk} view={view} /> : null,
    list: measuring ? (
      <MeasurementList
        measurements={measurements}
        shownIds={shownIds}
        onShow={(id) => setShownIds((now) => (now.includes(id) ? now.filter((one) => one !== id) : [...now, id]))}
        onOpen={(kept) => desk.open(kept)}
        onWithdraw={measuring.withdraw}
      />
    ) : null,
  }
}

function Starts({ desk, view }: { desk: DeskStore; view: PictureView | undefined }) {
  const start = (mode: 'arc' | 'model') => desk.set({ mode, opened: null })
  return (
    <div className="flex flex-wrap gap-2">
      <Button disabled={!view?.url} onClick={() => start('arc')} className="pointer-coarse:min-h-11">
        Measure an arc
      </Button>
      <Button disabled={!view?.url} onClick={() => start('model')} className="pointer-coarse:min-h-11">
        Would a lens do this?
      </Button>
    </div>
  )
}
