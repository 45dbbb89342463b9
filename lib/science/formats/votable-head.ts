/** What stands before the rows of a VOTable 1.4 in every serialisation, and after them. Source: VOTable 1.4 sections 3 and 4. */
import { ICRS_ID, UTC_ID, type CellValue, type Column, type Datatype } from '@/lib/science/formats/columns'
import { cellText } from '@/lib/science/formats/votable-cell'
import { escapeXml } from '@/lib/science/formats/xml-text'

export interface VotableInfo {
  name: string
  value: string
}

/** A value that holds for the whole table, such as the release. */
export interface VotableParam {
  name: string
  datatype: Datatype
  value: CellValue
  unit?: string
  ucd?: string
  description: string
  arraysize?: '*' | number
  xtype?: 'timestamp'
}

export interface VotableMeta {
  tableName: string
  description: string
  /** QUERY_STATUS OK is added unless given here */
  infos: readonly VotableInfo[]
  params?: readonly VotableParam[]
  /** What is told behind the table, such as that rows were left out (DALI 1.1 section 4.4.1: QUERY_STATUS OVERFLOW). */
  infosBehind?: readonly VotableInfo[]
}

export const votableTail = ({ infosBehind = [] }: VotableMeta): string =>
  ['</DATA>', '</TABLE>', ...infosBehind.map(infoElement), '</RESOURCE>', '</VOTABLE>', ''].join('\n')

/** Up to and with the element that opens DATA. */
export function votableHead<Row>(meta: VotableMeta, columns: readonly Column<Row>[]): string {
  const params = meta.params ?? []
  const refs = new Set([...columns.map(refOf), ...params.map(refOf)])
  const infos = meta.infos.some((info) => info.name === 'QUERY_STATUS')
    ? meta.infos
    : [{ name: 'QUERY_STATUS', value: 'OK' }, ...meta.infos]
  return [
    '<?xml version="1.0" encoding="UTF-8"?>',
    '<VOTABLE version="1.4"',
    ' xmlns="http://www.ivoa.net/xml/VOTable/v1.3"',
    ' xmlns:xsi="http://www.w3.org/2001/XMLSchema-instance"',
    ' xsi:schemaLocation="http://www.ivoa.net/xml/VOTable/v1.3 http://www.ivoa.net/xml/VOTable/VOTable-1.4.xsd">',
    ...(refs.has(ICRS_ID) ? [`<COOSYS ID="${ICRS_ID}" system="ICRS"/>`] : []),
    ...(refs.has(UTC_ID) ? [`<TIMESYS ID="${UTC_ID}" timescale="UTC" refposition="TOPOCENTER"/>`] : []),
    '<RESOURCE type="results">',
    ...infos.map(infoElement),
    ...params.map(paramElement),
    `<TABLE${attributes({ name: meta.tableName })}>`,
    `<DESCRIPTION>${escapeXml(meta.description)}</DESCRIPTION>`,
    ...columns.map(fieldElement),
    '<DATA>\n',
  ].join('\n')
}

const infoElement = ({ name, value }: VotableInfo): string => `<INFO${attributes({ name, value })}/>`

function fieldElement<Row>(column: Column<Row>): string {
  const isId = /^[A-Za-z_][\w.-]*$/.test(column.name) && column.name !== ICRS_ID && column.name !== UTC_ID
  const values = column.nullValue === undefined ? '' : `<VALUES null="${column.nullValue}"/>`
  return (
    `<FIELD${attributes({ ID: isId ? column.name : undefined, name: column.name, ...describe(column) })}>` +
    `<DESCRIPTION>${escapeXml(column.description)}</DESCRIPTION>${values}</FIELD>`
  )
}

function paramElement(param: VotableParam): string {
  const value = cellText(param, param.value, 'the parameters')
  return (
    `<PARAM${attributes({ name: param.name, ...describe(param), value })}>` +
    `<DESCRIPTION>${escapeXml(param.description)}</DESCRIPTION></PARAM>`
  )
}

type Described = Pick<VotableParam, 'datatype' | 'unit' | 'ucd' | 'arraysize' | 'xtype'> & { ref?: string }

function describe(item: Described): Record<string, string | undefined> {
  const isText = item.datatype === 'char' || item.datatype === 'unicodeChar'
  return {
    datatype: item.datatype,
    arraysize: item.arraysize === undefined ? (isText ? '*' : undefined) : String(item.arraysize),
    unit: item.unit,
    ucd: item.ucd,
    xtype: item.xtype,
    ref: refOf(item),
  }
}

function refOf(item: Described): string | undefined {
  if (item.ref !== undefined) return item.ref
  if (item.xtype === 'timestamp') return UTC_ID
  return item.ucd !== undefined && /^pos\.eq\.(ra|dec)(;|$)/.test(item.ucd) ? ICRS_ID : undefined
}

function attributes(values: Record<string, string | undefined>): string {
  return Object.entries(values)
    .map(([name, value]) => (value === undefined ? '' : ` ${name}="${escapeXml(value)}"`))
    .join('')
}
