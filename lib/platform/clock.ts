/** UTC time as the database keeps it. `offsetMs` moves it: leases, expiries, backoff. */
export function isoTime(offsetMs = 0): string {
  return new Date(Date.now() + offsetMs).toISOString()
}
