/** A whole new page load: everything that was read while signed out, or as somebody else, is left behind. */
export function enterWith(path: string, goTo: (path: string) => void = (to) => window.location.assign(to)): void {
  goTo(path)
}
