'use client'

import type { ChosenColumns, ManifestColumn } from '@/lib/work/intake/manifest-columns'
import type { MatchDone } from '@/lib/work/intake/match-work'

const LABELS: Record<ManifestColumn, string> = {
  file: 'File',
  candidate: 'Candidate',
  band: 'Band',
  ra: 'Right ascension',
  dec: 'Declination',
  pixelScale: 'Pixel scale',
  score: 'Score',
  lensRedshift: 'Lens redshift',
  sourceRedshift: 'Source redshift',
  truth: 'Truth (calibration)',
  explanation: 'Explanation (practice)',
}
const NAMES = Object.keys(LABELS) as ManifestColumn[]

/** Which header of a manifest stands for which column, as it was guessed from its spelling, to be changed. */
export function ManifestChoices({
  manifest,
  onChoose,
}: {
  manifest: MatchDone['manifests'][number]
  onChoose: (change: ChosenColumns) => void
}) {
  const { name, header, columns } = manifest
  return (
    <details className="rounded-control border border-line px-4 py-2.5">
      <summary className="text-small">
        Columns of <span className="figures">{name}</span>
      </summary>
      <div className="mt-3 grid grid-cols-2 gap-3 md:grid-cols-3">
        {NAMES.map((column) => (
          <label key={column} className="flex flex-col gap-1 text-note text-mute">
            {LABELS[column]}
            <select
              value={columns[column] ?? ''}
              onChange={(event) => onChoose({ [column]: event.target.value })}
              className="min-h-8 rounded-control border border-edge bg-well px-2 text-small text-text"
            >
              <option value="">none</option>
              {header.map((head) => (
                <option key={head} value={head}>
                  {head}
                </option>
              ))}
            </select>
          </label>
        ))}
      </div>
    </details>
  )
}
