/** The desk as a candidate's page shows it, for tests: a picture of 80 pixels of 0.2 arcsec in a box of 800 by 800. */
import { fireEvent, render } from '@testing-library/react'
import { useState } from 'react'
import { vi } from 'vitest'
import { benchCandidate } from '@/components/bench/_candidates'
import { ViewsTray } from '@/components/evidence/views-tray'
import { LightStore } from '@/components/light/light-store'
import { CONCORDANCE } from '@/lib/science/lensing/cosmology'
import type { StampGeometry } from '@/lib/science/imaging/stamp-geometry'
import type { CandidateMeasurements } from '@/lib/work/measuring/measurement-shown'
import { useEvidenceDesk, type Measuring } from './evidence-desk'
import type { MeasurementToSave, SaveAnswer } from './save-measurement'

/** Ten screen pixels a picture pixel: 50 an arcsec, east on the left. */
export const PIXELS_PER_ARCSEC = 50

export const measurements = (changes: Partial<CandidateMeasurements> = {}): CandidateMeasurements => ({
  standing: [],
  earlier: [],
  combined: null,
  mayMeasure: true,
  alone: false,
  cosmology: CONCORDANCE,
  lensRedshift: null,
  sourceRedshift: null,
  knownRedshifts: [],
  ...changes,
})

export function deskRoom(changes: Partial<CandidateMeasurements> = {}, geometry: Partial<StampGeometry> = {}) {
  const light = new LightStore('desk')
  const save = vi.fn<(measurement: MeasurementToSave) => Promise<SaveAnswer>>(async () => ({ done: 'Saved.' }))
  const withdraw = vi.fn(async () => ({ done: 'Withdrawn.' }))
  const { views, geometry: plain } = benchCandidate(1)
  const whole = { ...plain, ...geometry }
  const pictures = {
    views: views.map((view) => ({ ...view, geometry: whole })),
    geometry: whole,
    planesUrl: null,
    recipe: 1,
    closeFieldArcsec: 12,
  }
  function Room({ measuring }: { measuring: Measuring }) {
    const [shown, onChoose] = useState(0)
    const desk = useEvidenceDesk(measuring, pictures, light, { shown, onChoose })
    return (
      <div data-desk>
        <ViewsTray
          name="SWS-1"
          pictures={pictures}
          chosen={shown}
          onChoose={onChoose}
          keys
          viewKeys
          light={light}
          blinking={false}
          over={desk.over}
        />
        {desk.starts}
        {desk.panel}
        {desk.list}
      </div>
    )
  }
  const measured = measurements(changes)
  const { mayMeasure } = measured
  render(
    <Room
      measuring={{ measurements: measured, save: mayMeasure ? save : null, withdraw: mayMeasure ? withdraw : null }}
    />,
  )
  return { light, save, withdraw }
}

export const stage = () => {
  // By attribute: looking a role up in a page of so many fields takes long.
  const box = document.querySelector<HTMLElement>('[data-measuring]')!
  vi.spyOn(box, 'getBoundingClientRect').mockReturnValue(new DOMRect(0, 0, 800, 800))
  return box
}

const at = (east: number, north: number) => ({
  button: 0,
  pointerId: 1,
  isPrimary: true,
  pointerType: 'mouse',
  clientX: 400 - east * PIXELS_PER_ARCSEC,
  clientY: 400 - north * PIXELS_PER_ARCSEC,
})

export function press(east: number, north: number) {
  const box = stage()
  fireEvent.pointerDown(box, at(east, north))
  fireEvent.pointerUp(box, at(east, north))
}

export function drag(from: [number, number], to: [number, number]) {
  const box = stage()
  fireEvent.pointerDown(box, at(...from))
  fireEvent.pointerMove(box, at((from[0] + to[0]) / 2, (from[1] + to[1]) / 2))
  fireEvent.pointerMove(box, at(...to))
  fireEvent.pointerUp(box, at(...to))
}

export const pointNames = () =>
  [...document.querySelectorAll('[data-point]')].map((button) => button.getAttribute('aria-label'))
