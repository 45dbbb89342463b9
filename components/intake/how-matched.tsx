import Link from 'next/link'
import { KeyCap } from '@/components/ui/key-cap'

export interface MatchingRules {
  pattern: string
  bands: string[]
}

/** An example by the campaign's own pattern. */
export function exampleName(pattern: string, band: string): string {
  const name = pattern.replaceAll('{candidate}', 'SWS0417').replaceAll('{band}', band).replaceAll('{any}', 'cutout')
  return /\.(fits|fit|fts)$/i.test(name) ? name : `${name}.fits`
}

const COLUMNS = ['file', 'candidate', 'band', 'ra', 'dec', 'pixel_scale', 'score', 'lens_redshift', 'source_redshift']

/** How a file finds its candidate and its band, with this campaign's pattern and bands. */
export function HowMatched({ rules, settingsPath }: { rules: MatchingRules; settingsPath: string }) {
  const { pattern, bands } = rules
  return (
    <div className="flex flex-col gap-4 text-small text-mute">
      <p>A file finds its candidate and its band in this order; the first that tells wins:</p>
      <ol className="flex list-decimal flex-col gap-2 pl-5">
        <li>
          <strong className="font-semibold text-text">A manifest</strong>, a CSV sent with the files. Its first line
          names the columns, of which <KeyCap>file</KeyCap> or <KeyCap>candidate</KeyCap> is needed:{' '}
          <span className="figures text-text">{COLUMNS.join(', ')}</span>. Coordinates are degrees or sexagesimal.
        </li>
        <li>
          <strong className="font-semibold text-text">The name</strong> by the pattern{' '}
          <span className="figures text-text">{pattern}</span>, such as{' '}
          <span className="figures text-text">{bands.map((band) => exampleName(pattern, band)).join(', ')}</span>. It
          can be changed in the{' '}
          <Link href={settingsPath} className="underline underline-offset-4">
            settings
          </Link>
          .
        </li>
        <li>
          <strong className="font-semibold text-text">The header</strong>: the band from FILTER, BAND or EXTNAME, the
          candidate from OBJECT. One file may hold all bands as extensions or as a cube.
        </li>
      </ol>
      <p>
        Position and pixel scale come from the WCS, or from the manifest where it gives them. A file that cannot be used
        is refused by itself, with the reason; the others go on. Sending a file twice changes nothing.
      </p>
    </div>
  )
}
