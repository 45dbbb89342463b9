/** The query of a page's address; of a name that comes twice nothing is taken. */
export function searchOf(params: Record<string, string | string[] | undefined>): URLSearchParams {
  const search = new URLSearchParams()
  for (const [name, value] of Object.entries(params)) if (typeof value === 'string') search.set(name, value)
  return search
}
