import type { ReactNode } from 'react'
import type { CandidateEvidence } from '@/lib/work/rulings/candidate-evidence'

function Fact({ name, children }: { name: string; children: ReactNode }) {
  return (
    <div className="flex flex-col">
      <dt className="text-note text-mute">{name}</dt>
      <dd className="figures text-small">{children}</dd>
    </div>
  )
}

/** What came with the cutouts: scale, redshifts, the machine's score, and the files themselves. */
export function CandidateFacts({ evidence }: { evidence: CandidateEvidence }) {
  const { pixelScaleArcsec, judgement, files } = evidence
  const { score = null, lensRedshift = null, sourceRedshift = null } = judgement ?? {}
  return (
    <div className="flex flex-col gap-5">
      <dl className="flex flex-wrap gap-x-8 gap-y-3">
        <Fact name="Pixel scale">
          {pixelScaleArcsec === null ? 'unknown' : `${Number(pixelScaleArcsec.toFixed(4))}″ per pixel`}
        </Fact>
        {lensRedshift === null ? null : <Fact name="Redshift of the lens">{lensRedshift}</Fact>}
        {sourceRedshift === null ? null : <Fact name="Redshift of the source">{sourceRedshift}</Fact>}
        {score === null ? null : <Fact name="Score of the machine search">{score}</Fact>}
      </dl>
      {files === null ? null : (
        <section className="flex flex-col gap-1.5">
          <h2 className="text-small font-semibold text-mute">
            {files.length === 1 ? 'The file it came from' : 'The files it came from'}
          </h2>
          {files.length === 0 ? (
            <p className="text-small text-mute">No file has been read for it.</p>
          ) : (
            <ul className="figures text-small">
              {files.map((file) => (
                <li key={file.name} className="flex flex-wrap gap-x-3 [overflow-wrap:anywhere]">
                  {file.name}
                  <span className="text-mute">{file.bands.join(', ')}</span>
                </li>
              ))}
            </ul>
          )}
        </section>
      )}
    </div>
  )
}
