/**
 * What a file says of the frame of its positions: `system` and `equinox` of COOSYS (IVOA VOTable 1.4, section 3.1, whose values are
 * those of the IVOA vocabulary refframe and of VOTable 1.3).
 */
import type { ListFrame } from '@/db/schema/matching'

export type SaidFrame =
  { kind: ListFrame } | { kind: 'nothing' } | { kind: 'other'; name: string; stilts: string | null }

const J2000 = /^(j?2000(\.0*)?)?$/i
const B1950 = /^(b?1950(\.0*)?)?$/i

/** Other equinoxes than J2000 (and B1950 of FK4) precess by 50 arcsec a year, so that they are frames of their own. */
export function saidFrame(said: string | null | undefined): SaidFrame {
  const [system = '', equinox = ''] = (said ?? '').trim().split(/\s+/)
  const name = `${system}${equinox ? `, equinox ${equinox}` : ''}`
  const other = (stilts: string | null): SaidFrame => ({ kind: 'other', name, stilts })
  switch (system.toLowerCase()) {
    case '':
    case 'unknown':
      return J2000.test(equinox) ? { kind: 'nothing' } : other(null)
    case 'icrs':
    case 'icrf':
    case 'barycentric':
      return { kind: 'ICRS' }
    case 'fk5':
    case 'eq_fk5':
      return J2000.test(equinox) ? { kind: 'FK5' } : other(null)
    case 'galactic':
    case 'galactic_ii':
      return { kind: 'GALACTIC' }
    case 'fk4':
    case 'eq_fk4':
      return other(B1950.test(equinox) ? 'fk4' : null)
    case 'supergalactic':
    case 'super_galactic':
      return other('supergalactic')
    case 'ecliptic':
    case 'ecl_fk5':
      return other(J2000.test(equinox) ? 'ecliptic' : null)
    default:
      return other(null)
  }
}

/** The sentence that stops a list whose file says a frame that positions are not taken in from; null where all is well. */
export function foreignFrame(said: string | null | undefined, ra: string, dec: string): string | null {
  const frame = saidFrame(said)
  if (frame.kind !== 'other') return null
  const quoted = (column: string) => (/^\w+$/.test(column) ? column : `$COLUMN`)
  const how = frame.stilts
    ? `, for instance with stilts tpipe cmd="addskycoords -inunit deg -outunit deg ${frame.stilts} icrs ${quoted(ra)} ${quoted(dec)} ra_icrs dec_icrs"`
    : ''
  return `The file says that its positions are ${frame.name}. They can be read as ICRS, FK5 of J2000 or galactic: turn them to ICRS first${how}, and choose the new columns.`
}
