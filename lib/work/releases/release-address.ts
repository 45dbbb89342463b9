/** Where a release can be read, by whoever may. Never changes. */
export const releasePath = (slug: string, number: number): string => `/r/${slug}/${number}`

export const releaseAddress = (siteUrl: string, slug: string, number: number): string =>
  new URL(releasePath(slug, number), siteUrl).href

/** Of one of its files. */
export const releaseFilePath = (slug: string, number: number, name: string): string =>
  `${releasePath(slug, number)}/files/${encodeURIComponent(name)}`
