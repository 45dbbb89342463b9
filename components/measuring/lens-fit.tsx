import type { SieFit } from '@/lib/science/lensing/fit-sie'
import { withError } from './in-figures'
import { Remarks } from './mass-table'

const UNITS = { arcsec: '″', deg: '°', '': '' }

/** What a fit found, how far the points lie from it, and what its numbers are worth. */
export function LensFit({
  fit,
}: {
  fit: Pick<
    SieFit,
    | 'parameters'
    | 'residualArcsec'
    | 'residualPixels'
    | 'chiSquared'
    | 'constraints'
    | 'unknowns'
    | 'degreesOfFreedom'
    | 'notes'
  >
}) {
  const found = Number.isFinite(fit.residualArcsec) && fit.residualArcsec !== null
  return (
    <div role="status" className="flex flex-col gap-2">
      <p className="figures text-small">
        {found
          ? `Fitted: residual ${fit.residualArcsec.toFixed(3)}″, ${fit.residualPixels.toFixed(2)} px`
          : 'Fitted, but some points have no image'}
      </p>
      <p className="figures text-note text-mute">
        {fit.constraints} numbers, {fit.unknowns} unknowns
        {fit.degreesOfFreedom > 0 && found
          ? `; χ² ${fit.chiSquared.toFixed(1)} for ${fit.degreesOfFreedom} degrees of freedom`
          : ''}
      </p>
      <dl className="figures grid grid-cols-[auto_1fr] gap-x-4 gap-y-0.5 text-note">
        {fit.parameters.map(({ name, value, uncertainty, unit }) => (
          <div key={name} className="contents">
            <dt className="font-sans text-mute">{name}</dt>
            <dd className="text-right">{withError(value, uncertainty, UNITS[unit])}</dd>
          </div>
        ))}
      </dl>
      <Remarks lines={fit.notes} />
    </div>
  )
}
