'use client'

import { MOST_SHEAR, LEAST_AXIS_RATIO, withRadius, type DrawnLens } from './move-lens'
import type { DeskState } from './desk-state'
import type { DeskStore } from './desk-store'
import { NumberStepper } from './number-stepper'

/** Every number of the model as a field with steppers: all of it works by keyboard and by thumb. */
export function ModelFields({
  desk,
  state,
  pixelScaleArcsec,
}: {
  desk: DeskStore
  state: DeskState
  pixelScaleArcsec: number
}) {
  const { model, sourceRadiusArcsec } = state
  const { lens, source } = model
  const place = Math.max(0.005, Number((pixelScaleArcsec / 4).toPrecision(1)))
  const far = { low: -300, high: 300, step: place, decimals: 3, unit: '″' }
  const setLens = (change: Partial<DrawnLens>) =>
    desk.act({ model: { lens: { ...lens, ...change }, source }, fit: null })
  const setSource = (change: Partial<typeof source>) =>
    desk.act({ model: { lens, source: { ...source, ...change } }, fit: null })
  const angle = { unit: '°', step: 2, decimals: 0, low: 0, high: 180, round: true }
  const { shear } = lens
  return (
    <div className="grid grid-cols-2 gap-x-3 gap-y-2">
      <NumberStepper
        label="Einstein radius"
        value={lens.einsteinRadiusArcsec}
        unit="″"
        step={place}
        decimals={3}
        low={0.02}
        high={120}
        onChange={(radius) => desk.act({ model: { lens: withRadius(lens, radius), source }, fit: null })}
      />
      <NumberStepper
        label="Size of the source"
        value={sourceRadiusArcsec}
        unit="″"
        step={0.02}
        decimals={2}
        low={0.01}
        high={30}
        onChange={(size) => desk.act({ sourceRadiusArcsec: size })}
      />
      <NumberStepper
        label="Axis ratio"
        value={lens.axisRatio}
        step={0.02}
        decimals={2}
        low={LEAST_AXIS_RATIO}
        high={1}
        onChange={(axisRatio) => setLens({ axisRatio })}
      />
      <NumberStepper
        label="Long axis"
        value={lens.positionAngleDeg}
        {...angle}
        onChange={(positionAngleDeg) => setLens({ positionAngleDeg })}
      />
      <NumberStepper
        label="Shear"
        value={shear.strength}
        step={0.01}
        decimals={2}
        low={0}
        high={MOST_SHEAR}
        onChange={(strength) => setLens({ shear: { ...shear, strength } })}
      />
      <NumberStepper
        label="Shear angle"
        value={shear.positionAngleDeg}
        {...angle}
        onChange={(positionAngleDeg) => setLens({ shear: { ...shear, positionAngleDeg } })}
      />
      <NumberStepper label="Source east" value={source.east} {...far} onChange={(east) => setSource({ east })} />
      <NumberStepper label="Source north" value={source.north} {...far} onChange={(north) => setSource({ north })} />
      <NumberStepper
        label="Lens east"
        value={lens.centre.east}
        {...far}
        onChange={(east) => setLens({ centre: { ...lens.centre, east } })}
      />
      <NumberStepper
        label="Lens north"
        value={lens.centre.north}
        {...far}
        onChange={(north) => setLens({ centre: { ...lens.centre, north } })}
      />
    </div>
  )
}
