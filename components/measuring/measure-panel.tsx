'use client'

import { useMemo } from 'react'
import type { LightStore } from '@/components/light/light-store'
import { useClose } from '@/components/light/use-light'
import { Notice } from '@/components/ui/notice'
import { TextButton } from '@/components/ui/text-button'
import type { CandidateMeasurements } from '@/lib/work/measuring/measurement-shown'
import type { MeasuredShape } from '@/lib/work/measuring/measurement-input'
import type { PictureView } from '@/lib/work/stamps/candidate-pictures'
import { ArcPanel } from './arc-panel'
import { Choice } from './choice'
import type { DeskState } from './desk-state'
import type { DeskStore } from './desk-store'
import { curveNow, massNow, modelNow } from './fit-now'
import { KeptMeasurement } from './kept-measurement'
import { MassTable } from './mass-table'
import { ModelPanel } from './model-panel'
import { readRedshifts } from './redshift-draft'
import { RedshiftFields } from './redshift-fields'
import { SaveMeasurement, type SaveAction } from './save-measurement'
import { useDesk } from './use-desk'

export interface MeasurePanelProps {
  desk: DeskStore
  light: LightStore
  view: PictureView
  measurements: CandidateMeasurements
  onSave: SaveAction
  /** All views, to choose one where there is no room for slides. */
  views: readonly PictureView[]
  onView: (index: number) => void
}

/** Beside the picture while somebody measures. */
export function MeasurePanel(props: MeasurePanelProps) {
  const { desk, light, view } = props
  const state = useDesk(desk)
  const scale = view.geometry.pixelScaleArcsec
  return (
    <section aria-label="Measure" className="flex flex-col gap-4 rounded-tray border border-line bg-raise/40 p-4">
      <div className="flex flex-wrap items-end justify-between gap-3">
        {state.opened ? (
          <h2 className="text-body font-semibold">Measured by {state.opened.own ? 'you' : state.opened.by}</h2>
        ) : (
          <Choice
            label="Measure"
            options={[
              ['arc', 'An arc'],
              ['model', 'Would a lens do this?'],
            ]}
            value={state.mode === 'model' ? 'model' : 'arc'}
            onChange={(mode) =>
              desk.set(mode === 'arc' ? { mode, marking: false } : { mode, ...firstModel(state, scale) })
            }
          />
        )}
        <TextButton className="pointer-coarse:min-h-11" onClick={() => desk.close()}>
          Leave
        </TextButton>
      </div>
      <Field desk={desk} light={light} state={state} />
      <ViewSelect {...props} />
      {scale === null ? (
        <Notice>
          The pixel scale of this view is not known, so nothing can be measured on it in arcseconds. Choose another
          view, or give <code>pixel_scale</code> in a manifest.
        </Notice>
      ) : state.opened ? (
        <KeptMeasurement desk={desk} kept={state.opened} mayMeasure={props.measurements.mayMeasure} />
      ) : (
        <AtWork {...props} state={state} pixelScaleArcsec={scale} />
      )}
      {scale !== null && view.geometry.northAngleDeg === null ? (
        <Notice>Where north lies is not known here: up is taken for north. Radii hold; directions do not.</Notice>
      ) : null}
    </section>
  )
}

function ViewSelect({ view, views, onView }: MeasurePanelProps) {
  return (
    <label className="flex items-center gap-2 text-note text-mute sm:hidden">
      View
      <select
        value={views.indexOf(view)}
        onChange={(event) => onView(Number(event.target.value))}
        className="min-h-11 flex-1 rounded-control border border-edge bg-well px-2 text-small text-text"
      >
        {views.map(({ key, label }, index) => (
          <option key={key} value={index}>
            {label}
          </option>
        ))}
      </select>
    </label>
  )
}

/** A model begins at the radius of the curve that was put through the points; of these the person says what they are. */
function firstModel(state: DeskState, scale: number | null): Partial<DeskState> {
  if (scale === null || state.points.length < 3 || state.fit) return {}
  const now = curveNow(state, scale)
  if (!('fitted' in now) || now.radiusArcsec > 60) return { pointsAre: 'arc' }
  const { model } = state
  const ratio = now.radiusArcsec / model.lens.einsteinRadiusArcsec
  const { centre } = model.lens
  const source = {
    east: centre.east + (model.source.east - centre.east) * ratio,
    north: centre.north + (model.source.north - centre.north) * ratio,
  }
  return { pointsAre: 'arc', model: { lens: { ...model.lens, einsteinRadiusArcsec: now.radiusArcsec }, source } }
}

function Field({ desk, light, state }: { desk: DeskStore; light: LightStore; state: DeskState }) {
  const close = useClose(light)
  return (
    <Choice
      label="Field of view"
      options={[
        ['close', 'Close'],
        ['whole', 'Whole cutout'],
        ['wide', 'Room around it'],
      ]}
      value={state.wide ? 'wide' : close ? 'close' : 'whole'}
      onChange={(field) => {
        light.setClose(field === 'close')
        desk.set({ wide: field === 'wide' })
      }}
    />
  )
}

function AtWork({
  desk,
  view,
  measurements,
  onSave,
  state,
  pixelScaleArcsec,
}: MeasurePanelProps & { state: DeskState; pixelScaleArcsec: number }) {
  const { cosmology, standing } = measurements
  const { mode, points, curve, centre, model, fit, sourceRadiusArcsec, redshifts } = state
  const read = useMemo(() => readRedshifts(redshifts, desk.given), [redshifts, desk])
  const isModel = mode === 'model'
  const arc = useMemo(
    () => (isModel ? null : curveNow({ points, curve, centre }, pixelScaleArcsec)),
    [isModel, points, curve, centre, pixelScaleArcsec],
  )
  const now = useMemo(
    () => (isModel ? modelNow({ model, points, fit }, read.used, cosmology) : null),
    [isModel, model, points, fit, read, cosmology],
  )
  const radiusArcsec = isModel ? model.lens.einsteinRadiusArcsec : arc && 'fitted' in arc ? arc.radiusArcsec : null
  const errorArcsec = isModel
    ? (fit?.result.parameters[0]?.uncertainty ?? null)
    : arc && 'fitted' in arc
      ? arc.errorArcsec
      : null
  const mass = useMemo(
    () => (radiusArcsec === null ? null : massNow({ radiusArcsec, errorArcsec }, read.used, cosmology)),
    [radiusArcsec, errorArcsec, read, cosmology],
  )
  const fault = Object.values(read.faults)[0] ?? (mass && 'sentence' in mass ? mass.sentence : null)
  const ready =
    radiusArcsec === null || fault || !read.choices
      ? null
      : { view: view.key, pixelScaleArcsec, points, redshifts: read.choices, shape: shapeOf(state, sourceRadiusArcsec) }
  const replaces = standing.some(({ own, kind }) => own && (kind === 'model') === isModel)
  return (
    <>
      {now ? (
        <ModelPanel
          desk={desk}
          state={state}
          now={now}
          pixelScaleArcsec={pixelScaleArcsec}
          delays={read.used.lens !== null && read.used.source !== null}
        />
      ) : arc ? (
        <ArcPanel desk={desk} state={state} now={arc} pixelScaleArcsec={pixelScaleArcsec} />
      ) : null}
      <div className="flex flex-col gap-3 border-t border-line pt-3">
        <RedshiftFields desk={desk} state={state} read={read} known={measurements.knownRedshifts} />
        {mass && 'sentence' in mass ? <p className="text-note text-alarm">{mass.sentence}</p> : null}
        {mass && !('sentence' in mass) ? <MassTable mass={mass} cosmology={cosmology} /> : null}
      </div>
      <SaveMeasurement
        ready={ready}
        why={fault ?? 'There is no curve yet that could be kept.'}
        replaces={replaces}
        doubt={doubtOn(radiusArcsec, errorArcsec)}
        onSave={onSave}
      />
    </>
  )
}

/** What is kept goes into the campaign's value of the radius and into releases. */
function doubtOn(radiusArcsec: number | null, errorArcsec: number | null): string | null {
  if (radiusArcsec === null || errorArcsec === null || errorArcsec <= radiusArcsec / 2) return null
  return `The error of the radius is ${Math.round((100 * errorArcsec) / radiusArcsec)} % of it: points along more of the arc would measure it better.`
}

function shapeOf(state: DeskState, sourceRadiusArcsec: number): MeasuredShape {
  if (state.mode !== 'model') {
    return state.curve === 'circle' ? { kind: 'circle', centre: state.centre } : { kind: 'ellipse' }
  }
  const { lens, source } = state.model
  const { strength, positionAngleDeg } = lens.shear
  return {
    kind: 'model',
    lens: {
      centre: lens.centre,
      einsteinRadiusArcsec: lens.einsteinRadiusArcsec,
      axisRatio: lens.axisRatio,
      positionAngleDeg: lens.positionAngleDeg,
      ...(strength > 0 && { shear: { strength, positionAngleDeg } }),
    },
    source,
    sourceRadiusArcsec,
    fit: state.fit ? { kind: state.fit.kind, pointsAre: state.fit.pointsAre } : null,
  }
}
