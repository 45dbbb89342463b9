/**
 * Where to go after sign-in, from a parameter that anybody may have written: a path of this site, else home. The URL parser
 * decides, because browsers drop tabs and line breaks and take backslashes for slashes.
 */
export function ownPath(text: string | string[] | undefined | null): string {
  if (typeof text !== 'string' || !text.startsWith('/')) return '/'
  const base = 'http://own.invalid'
  if (!URL.canParse(text, base)) return '/'
  const url = new URL(text, base)
  if (url.origin !== base || /^\/(\/|signin|welcome|api\/)/.test(url.pathname)) return '/'
  return url.pathname + url.search + url.hash
}
