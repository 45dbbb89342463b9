/** The same right ascension from 0 to less than 360 degrees; one that is there already stays to the last bit. */
export const inOneTurn = (raDeg: number): number =>
  raDeg >= 0 && raDeg < 360 ? raDeg : (((raDeg % 360) + 360) % 360) % 360
