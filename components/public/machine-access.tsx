import type { ReactNode } from 'react'
import { MOST_RECORDS, USUAL_RECORDS } from '@/lib/work/releases/cone-query'

function Code({ children }: { children: ReactNode }) {
  return (
    <code
      className="figures block overflow-x-auto rounded-tray bg-well px-3 py-2 text-note whitespace-pre"
      tabIndex={0}
    >
      {children}
    </code>
  )
}

/** How programs read the release. @param addresses whole, with the site. */
export function MachineAccess({
  addresses,
  sample,
  isPublic,
}: {
  addresses: { cone: string; newestCone: string; capabilities: string; json: string }
  sample: { raDeg: number; decDeg: number } | null
  isPublic: boolean
}) {
  const { raDeg, decDeg } = sample ?? { raDeg: 150.1, decDeg: 2.2 }
  const joint = addresses.cone.includes('?') ? '&' : '?'
  const place = `RA=${raDeg.toFixed(5)}&DEC=${decDeg.toFixed(5)}&SR=0.1`
  return (
    <section aria-labelledby="machines" className="flex flex-col gap-3">
      <h2 id="machines" className="text-title font-semibold">
        For programs
      </h2>
      <p className="max-w-3xl text-small text-mute">
        IVOA Simple Cone Search 1.03 over this release: RA, DEC and SR in degrees (ICRS); VERB 1 to 3; MAXREC, usually{' '}
        {USUAL_RECORDS.toLocaleString('en')} and at most {MOST_RECORDS.toLocaleString('en')}, nearest first. Tools that
        ask for a cone search take its address.
      </p>
      <dl className="flex flex-col gap-2 text-small">
        <div>
          <dt className="text-note text-mute">Cone search of this release</dt>
          <dd>
            <Code>
              <a href={`${addresses.cone}${joint}${place}`} className="underline underline-offset-4">
                {addresses.cone}
                {joint}
              </a>
            </Code>
          </dd>
        </div>
        {isPublic ? (
          <div>
            <dt className="text-note text-mute">Of the newest release that stands, an address that stays</dt>
            <dd>
              <Code>{addresses.newestCone}?</Code>
            </dd>
          </div>
        ) : null}
        <div>
          <dt className="text-note text-mute">With pyvo</dt>
          <dd>
            <Code>
              {`import pyvo\npyvo.conesearch("${addresses.cone}${joint}", pos=(${raDeg.toFixed(5)}, ${decDeg.toFixed(5)}), radius=0.1).to_table()`}
            </Code>
          </dd>
        </div>
      </dl>
      <p className="flex flex-wrap gap-x-5 text-small">
        <a href={addresses.capabilities} className="inline-flex min-h-6 items-center underline underline-offset-4">
          What the service can (VOSI)
        </a>
        <a href={addresses.json} className="inline-flex min-h-6 items-center underline underline-offset-4">
          The whole catalogue as JSON
        </a>
      </p>
    </section>
  )
}
