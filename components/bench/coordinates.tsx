import { useState } from 'react'
import { formatDeclination, formatRightAscension } from '@/lib/science/sky/coordinates'
import { letGo } from './let-go'

const SHOWN_MS = 1500

/** The position in both notations; a click copies the one clicked. ICRS. */
export function Coordinates({ raDeg, decDeg }: { raDeg: number | null; decDeg: number | null }) {
  const [copied, setCopied] = useState<string | null>(null)
  if (raDeg === null || decDeg === null) return <span className="text-note text-mute">no position</span>
  const sexagesimal = `${formatRightAscension(raDeg)} ${formatDeclination(decDeg)}`
  // 1e-5 degrees are 0.04 arcsec, below a pixel of any ground-based survey.
  const degrees = `${raDeg.toFixed(5)} ${decDeg >= 0 ? '+' : '−'}${Math.abs(decDeg).toFixed(5)}`
  const copy = (text: string) => {
    const done = (said: string) => {
      setCopied(said)
      setTimeout(() => setCopied(null), SHOWN_MS)
    }
    // Browsers give no clipboard to pages that are not served over HTTPS.
    if (!navigator.clipboard) return done('Copying needs HTTPS')
    navigator.clipboard.writeText(plainCoordinates(text)).then(
      () => done('Copied'),
      () => done('Not copied'),
    )
  }
  return (
    <span className="figures flex items-center gap-x-3 text-note text-mute">
      <Copyable text={sexagesimal} what="sexagesimal" onCopy={copy} />
      <span className="hidden xl:inline">
        <Copyable text={`${degrees}°`} what="degrees" onCopy={() => copy(degrees)} />
      </span>
      <span role="status" className="font-sans text-lamp">
        {copied}
      </span>
    </span>
  )
}

/** As other tools read it: colons and the hyphen as minus. */
function plainCoordinates(text: string): string {
  return text
    .replace(/[ʰᵐ°′](?=\d)/g, ':')
    .replace(/[ˢ″]/g, '')
    .replaceAll('−', '-')
}

function Copyable({ text, what, onCopy }: { text: string; what: string; onCopy: (text: string) => void }) {
  return (
    <button
      type="button"
      title={`Copy the position in ${what}`}
      aria-label={`Copy the position in ${what}, ${text}`}
      onClick={letGo(() => onCopy(text))}
      className="min-h-11 whitespace-nowrap md:min-h-6 rounded-key hover:text-text"
    >
      {text}
    </button>
  )
}
