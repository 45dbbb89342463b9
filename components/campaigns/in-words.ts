/** `1 split`, `14 splits`, `1,204 splits` */
export function counted(number: number, noun: string, plural = `${noun}s`): string {
  return `${number.toLocaleString('en')} ${number === 1 ? noun : plural}`
}

/** A share in whole per cent; neither 0 nor 100 unless it is. */
export function percent(part: number, whole: number): string {
  if (whole <= 0 || part <= 0) return '0 %'
  if (part >= whole) return '100 %'
  return `${Math.min(99, Math.max(1, Math.round((100 * part) / whole)))} %`
}

/** `1 Dec 2026`, in UTC, the same on the server and in the browser. */
export function day(isoTime: string): string {
  return new Date(isoTime).toLocaleDateString('en-GB', {
    day: 'numeric',
    month: 'short',
    year: 'numeric',
    timeZone: 'UTC',
  })
}

/** `1 Dec 2026, 11:19 UTC` */
export function moment(isoTime: string): string {
  return `${day(isoTime)}, ${isoTime.slice(11, 16)} UTC`
}
