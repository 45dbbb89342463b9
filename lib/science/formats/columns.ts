/**
 * A column of a table that leaves Ringside, described once for every format.
 *
 * UCDs: IVOA UCD1+ (https://www.ivoa.net/documents/UCD1+/). Units: IVOA VOUnits ('deg', 'arcsec', 'km/s', 'solMass').
 * Datatypes: VOTable 1.4 section 2.1. Whatever a person can have typed must be 'unicodeChar': 'char' is ASCII only.
 */
export type Datatype = 'char' | 'unicodeChar' | 'double' | 'float' | 'int' | 'long' | 'short' | 'boolean'

export type CellValue = string | number | boolean | null

export interface Column<Row> {
  name: string
  datatype: Datatype
  unit?: string
  ucd?: string
  description: string
  /** '*' for text of any length, which text columns have when nothing is said */
  arraysize?: '*' | number
  /** 'timestamp' for ISO 8601 times in UTC */
  xtype?: 'timestamp'
  /** ID of the coordinate or time system; columns of ICRS positions and times have theirs when nothing is said */
  ref?: string
  /** an integer that no row holds, written where a row has null; without it the cell is empty */
  nullValue?: number
  value(row: Row): CellValue
}

/** ID of the ICRS coordinate system in our documents, for `Column.ref`. */
export const ICRS_ID = 'sys_icrs'

/** ID of the UTC time system in our documents, for `Column.ref`. */
export const UTC_ID = 'sys_utc'
