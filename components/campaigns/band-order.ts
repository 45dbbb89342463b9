/**
 * Filters whose order everybody in the trade knows, shortest wavelength first: the optical letters, then the near infrared.
 * Only the order is used. z and y stand before Y, the infrared filter at 1 micrometre. From memory.
 */
const KNOWN_ORDER = ['u', 'g', 'r', 'i', 'z', 'y', 'Y', 'J', 'H', 'K']

/** The first two neighbours that stand the wrong way round, `['i', 'g']`, or null. Bands of other names are passed over. */
export function bandsOutOfOrder(bands: readonly string[]): [string, string] | null {
  const known = bands.filter((band) => KNOWN_ORDER.includes(band))
  const index = known.findIndex((band, at) => at > 0 && KNOWN_ORDER.indexOf(band) < KNOWN_ORDER.indexOf(known[at - 1]))
  return index > 0 ? [known[index - 1], known[index]] : null
}
