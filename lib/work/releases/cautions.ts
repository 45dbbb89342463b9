import { CAUTION } from '@/lib/work/catalogue/export-columns'

/** Both stand in every file of a release that has a place for text, and on the form that publishes it. */
export const VISUAL_CAUTION = CAUTION

/** The registry of acronyms: IAU Commission B2, through the CDS (https://cds.unistra.fr/cgi-bin/Dic-Simbad). */
export const acronymCaution = (acronym: string): string =>
  `Designations begin with the acronym ${acronym}. By the IAU rule an acronym must be registered before designations made with it ` +
  `are published; Ringside does not register it.`

export const cautionsOf = ({ acronym }: { acronym: string }): string[] => [VISUAL_CAUTION, acronymCaution(acronym)]
