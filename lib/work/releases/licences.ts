/** Licences that the form offers by name; any other is given in words. Identifiers of the SPDX list. */
export const LICENCES = [
  { id: 'CC-BY-4.0', name: 'Creative Commons Attribution 4.0', url: 'https://creativecommons.org/licenses/by/4.0/' },
  {
    id: 'CC-BY-SA-4.0',
    name: 'Creative Commons Attribution-ShareAlike 4.0',
    url: 'https://creativecommons.org/licenses/by-sa/4.0/',
  },
  {
    id: 'CC0-1.0',
    name: 'Creative Commons Zero 1.0, no rights reserved',
    url: 'https://creativecommons.org/publicdomain/zero/1.0/',
  },
] as const

/** The licence of this SPDX id; null where it was given in words. */
export const licenceOf = (licence: string) => LICENCES.find(({ id }) => id === licence) ?? null

/** Name and identifier, or the words. */
export function licenceInWords(licence: string): string {
  const known = licenceOf(licence)
  return known ? `${known.name} (${known.id}), ${known.url}` : licence
}
