import { useId } from 'react'
import type { PaintingRanges } from '@/lib/science/lensing/painting/painting-ranges'

type RangeName = {
  [Name in keyof PaintingRanges]: PaintingRanges[Name] extends number ? never : Name
}[keyof PaintingRanges]
type ScatterName = Exclude<keyof PaintingRanges, RangeName>

/** What each is, in which unit, and where its usual values come from. */
const RANGES: readonly { name: RangeName; label: string; unit: string; source: string; step: number }[] = [
  {
    name: 'einsteinRadiusArcsec',
    label: 'Einstein radius',
    unit: 'arcsec',
    source: 'What surveys from the ground resolve, up to a massive galaxy’s (Treu 2010).',
    step: 0.1,
  },
  {
    name: 'arcSignalToNoise',
    label: 'Signal-to-noise of the arc',
    unit: '',
    source:
      'Against the sky’s noise, in the band where it is best. Our choice: at 15 nothing is seen, from 100 on most see it at once.',
    step: 1,
  },
  {
    name: 'sourceOffset',
    label: 'Source off the axis',
    unit: 'Einstein radii',
    source: 'Our choice: 0 makes rings, from 0.3 on arcs and doubles.',
    step: 0.05,
  },
  {
    name: 'sourceRadiusArcsec',
    label: 'Half-light radius of the source',
    unit: 'arcsec',
    source: 'Our choice.',
    step: 0.05,
  },
  { name: 'sersicIndex', label: 'Sérsic index', unit: '', source: 'Our choice: 1 is a disc.', step: 0.1 },
  { name: 'sourceAxisRatio', label: 'Axis ratio of the source', unit: '', source: 'Our choice.', step: 0.05 },
  {
    name: 'shearStrength',
    label: 'Shear',
    unit: '',
    source: 'Some hundredths (Keeton, Kochanek & Seljak 1997).',
    step: 0.01,
  },
]

const SCATTERS: readonly { name: ScatterName; label: string; unit: string; source: string; step: number }[] = [
  {
    name: 'axisRatioScatter',
    label: 'Axis ratio of the mass, scatter about the light’s',
    unit: '',
    source: 'Koopmans et al. 2006.',
    step: 0.01,
  },
  {
    name: 'positionAngleScatterDeg',
    label: 'Angle of the mass, scatter about the light’s',
    unit: 'degrees',
    source: 'Koopmans et al. 2006.',
    step: 1,
  },
]

const FIELD =
  'figures min-h-8 w-20 rounded-control border border-edge bg-well px-2 text-small aria-invalid:border-alarm pointer-coarse:min-h-11'

/** The ranges that lenses are drawn from, each with its lower and upper end. */
export function RangeFields({
  ranges,
  errors,
  onChange,
}: {
  ranges: PaintingRanges
  errors: Record<string, string>
  onChange: (ranges: PaintingRanges) => void
}) {
  const id = useId()
  const errorOf = (name: string) => Object.entries(errors).find(([field]) => field.endsWith(name))?.[1]
  const line = (name: string, source: string) => {
    const error = errorOf(name)
    return (
      <p id={`${id}-${name}`} className={`text-note ${error ? 'text-alarm' : 'text-mute'}`}>
        {error ?? source}
      </p>
    )
  }
  const input = (
    name: keyof PaintingRanges,
    label: string,
    step: number,
    value: number,
    take: (value: number) => void,
  ) => (
    <input
      type="number"
      aria-label={label}
      aria-describedby={`${id}-${name}`}
      aria-invalid={errorOf(name) ? true : undefined}
      step={step}
      defaultValue={value}
      onChange={(event) => {
        if (event.target.value !== '' && Number.isFinite(event.target.valueAsNumber)) take(event.target.valueAsNumber)
      }}
      className={FIELD}
    />
  )
  return (
    <div className="grid gap-x-8 gap-y-4 sm:grid-cols-2">
      {RANGES.map(({ name, label, unit, source, step }) => {
        const [low, high] = ranges[name]
        return (
          <fieldset key={name} className="flex flex-col gap-1">
            <legend className="mb-1 text-small font-semibold">{label}</legend>
            <span className="flex items-center gap-2 text-small">
              {input(name, `${label}, from`, step, low, (value) => onChange({ ...ranges, [name]: [value, high] }))}
              to
              {input(name, `${label}, to`, step, high, (value) => onChange({ ...ranges, [name]: [low, value] }))}
              <span className="text-note text-mute">{unit}</span>
            </span>
            {line(name, source)}
          </fieldset>
        )
      })}
      {SCATTERS.map(({ name, label, unit, source, step }) => (
        <div key={name} className="flex flex-col gap-1">
          <span className="mb-1 text-small font-semibold">{label}</span>
          <span className="flex items-center gap-2 text-small">
            {input(name, label, step, ranges[name], (value) => onChange({ ...ranges, [name]: value }))}
            <span className="text-note text-mute">{unit}</span>
          </span>
          {line(name, source)}
        </div>
      ))}
    </div>
  )
}
