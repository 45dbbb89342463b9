/**
 * What the cone search of a release says of itself. Sources: IVOA Support Interfaces (VOSI) 1.1 (2017-05-24), sections 3 and 4;
 * VODataService 1.1; SimpleDALRegExt 1.0 (2013-12-12) section 3.1 for `ConeSearch`, with MaxSR, MaxRecords and Verbosity of Simple Cone
 * Search 1.03 section 3.
 */
import type { Column } from '@/lib/science/formats/columns'
import { escapeXml } from '@/lib/science/formats/xml-text'
import { MOST_RECORDS } from './cone-query'

export const VOSI_DOCUMENTS = ['capabilities', 'availability', 'tables'] as const
export type VosiDocument = (typeof VOSI_DOCUMENTS)[number]

const HEAD = '<?xml version="1.0" encoding="UTF-8"?>\n'
const XSI = 'xmlns:xsi="http://www.w3.org/2001/XMLSchema-instance"'
const VS = 'xmlns:vs="http://www.ivoa.net/xml/VODataService/v1.1"'

interface Parameter {
  name: string
  use: 'required' | 'optional'
  unit?: string
  dataType: 'real' | 'integer' | 'string'
  description: string
}

const PARAMETERS: readonly Parameter[] = [
  { name: 'RA', use: 'required', unit: 'deg', dataType: 'real', description: 'Right ascension of the centre, ICRS' },
  { name: 'DEC', use: 'required', unit: 'deg', dataType: 'real', description: 'Declination of the centre, ICRS' },
  { name: 'SR', use: 'required', unit: 'deg', dataType: 'real', description: 'Radius; 0 asks for the columns alone' },
  {
    name: 'VERB',
    use: 'optional',
    dataType: 'integer',
    description: '1 for the fewest columns, 2 for the usual ones, 3 for all',
  },
  {
    name: 'MAXREC',
    use: 'optional',
    dataType: 'integer',
    description: `Most entries, ${MOST_RECORDS} at the most; 0 asks for the columns alone`,
  },
  { name: 'RESPONSEFORMAT', use: 'optional', dataType: 'string', description: 'votable, or votable/b2 for BINARY2' },
]

function parameterElement({ name, use, unit, dataType, description }: Parameter): string {
  const parts = [`<name>${name}</name>`, `<description>${escapeXml(description)}</description>`]
  if (unit) parts.push(`<unit>${unit}</unit>`)
  parts.push(`<dataType>${dataType}</dataType>`)
  return `<param use="${use}" std="true">${parts.join('')}</param>`
}

export interface ConeService {
  /** Of the cone search, without its question mark. */
  address: string
  /** Of a link, where the release is opened with one: part of every address. */
  key: string | null
  /** An entry that a test query finds; null where the release has none. */
  sample: { raDeg: number; decDeg: number } | null
}

/** The base URL of section 2 item 1: it ends in `?`, or in `&` where it has arguments of its own. */
const coneBaseUrl = ({ address, key }: Pick<ConeService, 'address' | 'key'>): string =>
  key === null ? `${address}?` : `${address}?key=${encodeURIComponent(key)}&`

/** `VOSI 1.1 section 4.1`, with the capability that SimpleDALRegExt describes. */
export function capabilitiesDocument(service: ConeService): string {
  const { address, key, sample } = service
  const vosi = (name: VosiDocument) => {
    const url = `${address}/${name}${key === null ? '' : `?key=${encodeURIComponent(key)}`}`
    return [
      `<capability standardID="ivo://ivoa.net/std/VOSI#${name}">`,
      `<interface xsi:type="vs:ParamHTTP"><accessURL use="full">${escapeXml(url)}</accessURL></interface>`,
      '</capability>',
    ]
  }
  const test = sample ? `RA=${sample.raDeg}&DEC=${sample.decDeg}&SR=0.01` : 'RA=0&DEC=90&SR=0'
  const query = sample ?? { raDeg: 0, decDeg: 90 }
  return (
    HEAD +
    [
      `<vosi:capabilities xmlns:vosi="http://www.ivoa.net/xml/VOSICapabilities/v1.0" ${XSI}`,
      ` ${VS} xmlns:cs="http://www.ivoa.net/xml/ConeSearch/v1.0">`,
      '<capability standardID="ivo://ivoa.net/std/ConeSearch" xsi:type="cs:ConeSearch">',
      '<interface xsi:type="vs:ParamHTTP" role="std">',
      `<accessURL use="base">${escapeXml(coneBaseUrl(service))}</accessURL>`,
      '<queryType>GET</queryType>',
      '<resultType>text/xml</resultType>',
      ...PARAMETERS.map(parameterElement),
      `<testQuery>${escapeXml(test)}</testQuery>`,
      '</interface>',
      '<maxSR>180</maxSR>',
      `<maxRecords>${MOST_RECORDS}</maxRecords>`,
      '<verbosity>true</verbosity>',
      `<testQuery><ra>${query.raDeg}</ra><dec>${query.decDeg}</dec><sr>${sample ? 0.01 : 0}</sr></testQuery>`,
      '</capability>',
      ...vosi('capabilities'),
      ...vosi('availability'),
      ...vosi('tables'),
      '</vosi:capabilities>',
      '',
    ].join('\n')
  )
}

/** VOSI 1.1 section 5. @param upSince ISO 8601, UTC. */
export function availabilityDocument(upSince: string): string {
  return (
    HEAD +
    [
      '<vosi:availability xmlns:vosi="http://www.ivoa.net/xml/VOSIAvailability/v1.0">',
      '<vosi:available>true</vosi:available>',
      `<vosi:upSince>${upSince}</vosi:upSince>`,
      '</vosi:availability>',
      '',
    ].join('\n')
  )
}

/** VOSI 1.1 section 6: the columns of the answers, those of VERB=2 marked as the usual ones. */
export function tablesDocument(
  table: { name: string; description: string },
  columns: readonly Column<never>[],
  usual: ReadonlySet<string>,
): string {
  return (
    HEAD +
    [
      `<vosi:tableset xmlns:vosi="http://www.ivoa.net/xml/VOSITables/v1.0" ${XSI} ${VS}>`,
      '<schema>',
      '<name>default</name>',
      '<table type="output">',
      `<name>${escapeXml(table.name)}</name>`,
      `<description>${escapeXml(table.description)}</description>`,
      ...columns.map((column) => columnElement(column, usual.has(column.name))),
      '</table>',
      '</schema>',
      '</vosi:tableset>',
      '',
    ].join('\n')
  )
}

function columnElement({ name, description, unit, ucd, datatype, arraysize }: Column<never>, isUsual: boolean): string {
  const size = arraysize ?? (datatype === 'char' || datatype === 'unicodeChar' ? '*' : undefined)
  return [
    '<column>',
    `<name>${name}</name>`,
    `<description>${escapeXml(description)}</description>`,
    unit ? `<unit>${unit}</unit>` : '',
    ucd ? `<ucd>${ucd}</ucd>` : '',
    `<dataType xsi:type="vs:VOTableType"${size === undefined ? '' : ` arraysize="${size}"`}>${datatype}</dataType>`,
    isUsual ? '<flag>usual</flag>' : '',
    '</column>',
  ].join('')
}
