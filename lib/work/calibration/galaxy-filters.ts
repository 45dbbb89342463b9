/** Which galaxies a lead chooses from. */
export const GALAXY_FILTERS = ['set aside', 'graded N', 'any'] as const
export type GalaxyFilter = (typeof GALAXY_FILTERS)[number]
