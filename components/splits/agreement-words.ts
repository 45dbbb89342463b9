/**
 * What an alpha means, after K. Krippendorff (2004), Content Analysis, 2nd ed., section 11.4.2: rely on variables with alpha
 * from 0.800, draw tentative conclusions from 0.667. The figures are quoted from memory of that book.
 */
export function alphaInWords(alpha: number): string {
  if (alpha >= 0.8) return 'reliable'
  if (alpha >= 0.667) return 'tentative'
  if (alpha > 0) return 'low'
  return 'none beyond chance'
}

/** What a kappa means, after J. R. Landis and G. G. Koch (1977), Biometrics 33, 159: benchmarks that they call arbitrary. */
export function kappaInWords(kappa: number): string {
  if (kappa < 0) return 'poor'
  if (kappa <= 0.2) return 'slight'
  if (kappa <= 0.4) return 'fair'
  if (kappa <= 0.6) return 'moderate'
  if (kappa <= 0.8) return 'substantial'
  return 'almost perfect'
}
