import { CopyText } from '@/components/table/copy-text'
import { formatDeclination, formatRightAscension } from '@/lib/science/sky/coordinates'

/** Decimals of a degree that keep a hundredth of an arcsecond. */
const DEGREE_DECIMALS = 6

/** Where a candidate is, in sexagesimal and in degrees; a click copies either. */
export function Position({ raDeg, decDeg }: { raDeg: number | null; decDeg: number | null }) {
  if (raDeg === null || decDeg === null) {
    return <p className="text-small text-mute">No position: neither a header nor a manifest has told one yet.</p>
  }
  const sexagesimal = `${formatRightAscension(raDeg)} ${formatDeclination(decDeg)}`
  const degrees = `${raDeg.toFixed(DEGREE_DECIMALS)} ${decDeg.toFixed(DEGREE_DECIMALS)}`
  return (
    <div className="figures flex flex-wrap items-center gap-x-5 text-small text-mute">
      <CopyText text={sexagesimal} what="position">
        {sexagesimal}
      </CopyText>
      <CopyText text={degrees} what="position in degrees">
        {degrees.replace(' -', ' −')} deg
      </CopyText>
      <span className="font-sans text-note">ICRS</span>
    </div>
  )
}
