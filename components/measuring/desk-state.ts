/** What lies on the desk of somebody who measures: points, a curve through them, or a lens model. Plain values. */
import type { SieFit } from '@/lib/science/lensing/fit-sie'
import type { LensKind } from '@/lib/science/lensing/fit-sie-parameters'
import type { SkyVector } from '@/lib/science/lensing/sis'
import { HERE } from '@/lib/work/measuring/fitted'
import type { MeasurementShown } from '@/lib/work/measuring/measurement-shown'
import type { Grip, LensAndSource } from './move-lens'
import { draftFrom, draftOf, type RedshiftDraft, type Which } from './redshift-draft'

export type Mode = 'off' | 'arc' | 'model'

/** What undo goes back through. */
export interface Measured {
  points: readonly SkyVector[]
  /** Which point the keys and the buttons are about. */
  chosen: number | null
  curve: 'circle' | 'ellipse'
  centre: 'free' | 'held'
  model: LensAndSource
  sourceRadiusArcsec: number
  /** Of the model as it is now; null once something was moved by hand. */
  fit: { kind: LensKind; pointsAre: 'images' | 'arc'; result: SieFit } | null
}

export interface DeskState extends Measured {
  mode: Mode
  /** Of a model: whether a press sets a point, or moves what is held. */
  marking: boolean
  /** What the points are to a fit. */
  pointsAre: 'images' | 'arc'
  fitKind: LensKind
  grip: Grip
  /** Where the keys stand; seen while they are used. */
  cross: SkyVector
  redshifts: Record<Which, RedshiftDraft>
  wide: boolean
  /** Of a model: how much lies over the picture, so that arcs can be compared by eye. */
  drawn: 'all' | 'arcs' | 'nothing'
  /** A kept measurement that is looked at and not changed. */
  opened: MeasurementShown | null
}

export interface Given {
  lens: number | null
  source: number | null
}

export function emptyDesk(given: Given, fieldArcsec: number): DeskState {
  return {
    mode: 'off',
    points: [],
    chosen: null,
    curve: 'circle',
    centre: 'free',
    model: modelOf(Math.max(0.4, Math.min(1.5, fieldArcsec / 8))),
    sourceRadiusArcsec: 0.15,
    fit: null,
    marking: false,
    pointsAre: 'images',
    fitKind: 'ellipsoid',
    grip: 'source',
    cross: HERE,
    redshifts: { lens: draftOf('lens', given.lens), source: draftOf('source', given.source) },
    wide: false,
    drawn: 'all',
    opened: null,
  }
}

/** Somewhere to begin: a galaxy a little flattened, with a source off its middle that makes four images. */
export function modelOf(radiusArcsec: number): LensAndSource {
  return {
    lens: {
      centre: HERE,
      einsteinRadiusArcsec: radiusArcsec,
      axisRatio: 0.75,
      positionAngleDeg: 45,
      shear: { strength: 0, positionAngleDeg: 0 },
    },
    source: { east: 0.08 * radiusArcsec, north: 0.05 * radiusArcsec },
  }
}

export const measuredOf = (state: DeskState): Measured => {
  const { points, chosen, curve, centre, model, sourceRadiusArcsec, fit } = state
  return { points, chosen, curve, centre, model, sourceRadiusArcsec, fit }
}

/** The desk as a kept measurement was made; what it does not speak of stays. */
export function deskFrom(state: DeskState, kept: MeasurementShown, given: Given): DeskState {
  const { fitted } = kept
  const common: DeskState = {
    ...state,
    points: kept.points,
    chosen: null,
    fit: null,
    marking: false,
    redshifts: {
      lens: draftFrom('lens', kept.lens, given.lens),
      source: draftFrom('source', kept.source, given.source),
    },
    opened: null,
  }
  if (fitted.kind !== 'model') {
    const centre = fitted.kind === 'circle' && fitted.centreIsHeld ? 'held' : 'free'
    return { ...common, mode: 'arc', curve: fitted.kind, centre }
  }
  const { lens, source, sourceRadiusArcsec, fit } = fitted
  const shear = lens.shear ?? { strength: 0, positionAngleDeg: 0 }
  return {
    ...common,
    mode: 'model',
    model: { lens: { ...lens, centre: lens.centre ?? HERE, shear }, source },
    sourceRadiusArcsec,
    pointsAre: fit?.pointsAre ?? state.pointsAre,
    fitKind: fit?.kind ?? state.fitKind,
  }
}

/** Points after one is set, moved or taken away; a fit of other points is none. */
export function setPoint(state: Measured, at: SkyVector): Partial<Measured> {
  return { points: [...state.points, at], chosen: state.points.length, fit: null }
}

export function movePoint(state: Measured, which: number, to: SkyVector): Partial<Measured> {
  return { points: state.points.map((point, k) => (k === which ? to : point)), chosen: which, fit: null }
}

export function deletePoint(state: Measured, which: number): Partial<Measured> {
  const points = state.points.filter((_, k) => k !== which)
  return { points, chosen: points.length === 0 ? null : Math.min(which, points.length - 1), fit: null }
}
