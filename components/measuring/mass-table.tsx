import type { Cosmology } from '@/lib/science/lensing/cosmology'
import type { EinsteinMass, Interval } from '@/lib/science/lensing/einstein-mass'
import { cosmologyInWords } from '@/lib/work/campaigns/cosmology-of'
import { powerOfTen, threeDigits } from './in-figures'

/** Value and both ends with the decimals that the value has with three digits. */
function plain({ value, low, high }: Interval) {
  const decimals = threeDigits(value).split('.')[1]?.length ?? 0
  const ends = [low, high].map((end) => (decimals > 0 ? end.toFixed(decimals) : threeDigits(end)))
  return { value: threeDigits(value), between: rangeOf({ low, high }, ends) }
}

/** Where the low end is 0 only the high one is measured. */
const rangeOf = ({ low, high }: Pick<Interval, 'low' | 'high'>, [from, to]: string[]) =>
  low === high ? null : low === 0 ? `below ${to}` : `${from} to ${to}`

/** One power of ten for the value and both ends. */
function mass({ value, low, high }: Interval) {
  const exponent = Math.floor(Math.log10(value))
  const ends = [low, high].map((end) => (end / 10 ** exponent).toFixed(2))
  return { value: powerOfTen(value, exponent), between: rangeOf({ low, high }, ends) }
}

const RANGES =
  'Ranges hold the middle 68 % of what errors leave; within an assumed range of redshift every value counts alike. '

/** What the Einstein radius weighs, each with the middle 68 % that errors and ranges leave. */
export function MassTable({ mass: found, cosmology }: { mass: EinsteinMass; cosmology: Cosmology }) {
  const rows = [
    ['Dispersion, SIS', 'km/s', plain(found.velocityDispersionKmS)],
    ['Mass inside', 'M☉', mass(found.massSolar)],
    ['Critical density', 'M☉/pc²', plain(found.criticalDensitySolarPerPc2)],
    ['Einstein radius', 'kpc', plain(found.radiusKpc)],
  ] as const
  return (
    <div className="flex flex-col gap-2">
      <dl className="figures flex flex-col gap-1 text-small">
        {rows.map(([name, unit, { value, between }]) => (
          <div key={name} className="flex justify-between gap-x-4">
            <dt className="font-sans text-note text-mute">{name}</dt>
            <dd className="text-right">
              {value} {unit}
              {between ? (
                <span className="block text-note text-mute">
                  {between}
                  {found.isAssumed ? ', assumed' : ''}
                </span>
              ) : null}
            </dd>
          </div>
        ))}
      </dl>
      <Remarks lines={found.unusual.map(({ sentence }) => sentence)} strong />
      <Remarks lines={found.notes} />
      <p className="text-note text-mute">
        {rows.some(([, , { between }]) => between) ? RANGES : ''}
        {cosmologyInWords(cosmology)}.
      </p>
    </div>
  )
}

/** Sentences on numbers: pointed out, never refused. */
export function Remarks({ lines, strong = false }: { lines: readonly string[]; strong?: boolean }) {
  if (lines.length === 0) return null
  return (
    <ul className={`flex flex-col gap-1 text-note ${strong ? 'border-l-4 border-split pl-2.5' : 'text-mute'}`}>
      {lines.map((line) => (
        <li key={line}>{line}</li>
      ))}
    </ul>
  )
}
