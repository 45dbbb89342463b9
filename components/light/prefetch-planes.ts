/** Fetches and decodes the pixels of what comes next; a failure shows when that candidate does. */
export function prefetchPlanes(planesUrl: string): void {
  void import('./planes-cache').then(({ loadPlanes }) => loadPlanes(planesUrl)).catch(() => {})
}
