import { describe, expect, it } from 'vitest'
import { readReference, relativeError } from './_reference'
import { einsteinRadiusArcsec, massInEinsteinRadius, sisDeflection, sisImages, velocityDispersionKmS } from './sis'

interface RadiusRow {
  sigma_km_s: number
  D_l_mpc: number
  D_s_mpc: number
  D_ls_mpc: number
  theta_E_arcsec: number
  M_E_msun: number
}

interface ImageRow {
  beta_arcsec: number
  theta_E_arcsec: number
  theta_plus?: number
  theta_minus?: number
  mu_plus?: number
  mu_minus?: number
}

const reference = readReference<{
  sis_einstein_radius_and_mass: { rows: RadiusRow[] }
  sis_images: { rows: ImageRow[] }
  published_scalings: { text: string; value_computed?: number; value_computed_km_s?: number }[]
}>('lensing')

describe('the singular isothermal sphere', () => {
  // Own numpy code on theta_E = 4 pi (sigma/c)^2 D_ls/D_s with astropy's distances, ten digits; masses with IAU GM_sun,
  // where the fixture's G / M_sun pair is good to 1e-4.
  it.each(reference.sis_einstein_radius_and_mass.rows)('of $sigma_km_s km/s has its Einstein radius', (row) => {
    const ratio = row.D_ls_mpc / row.D_s_mpc
    expect(relativeError(einsteinRadiusArcsec(row.sigma_km_s, ratio), row.theta_E_arcsec)).toBeLessThan(2e-9)
    expect(relativeError(velocityDispersionKmS(row.theta_E_arcsec, ratio), row.sigma_km_s)).toBeLessThan(2e-9)
    const distances = { lensMpc: row.D_l_mpc, sourceMpc: row.D_s_mpc, betweenMpc: row.D_ls_mpc }
    expect(relativeError(massInEinsteinRadius(row.theta_E_arcsec, distances), row.M_E_msun)).toBeLessThan(1e-4)
  })

  // Narayan & Bartelmann, arXiv:astro-ph/9606001: "1.4 arcsec (sigma / 220 km/s)^2 D_ls/D_s".
  it('of 220 km/s has 1.4 arcsec at the most', () => {
    expect(einsteinRadiusArcsec(220, 1)).toBeCloseTo(1.4, 1)
    expect(
      relativeError(einsteinRadiusArcsec(220, 1), reference.published_scalings[0].value_computed ?? 0),
    ).toBeLessThan(1e-8)
    expect(
      relativeError(velocityDispersionKmS(1, 1), reference.published_scalings[1].value_computed_km_s ?? 0),
    ).toBeLessThan(1e-8)
  })

  it.each(reference.sis_images.rows.filter((row) => row.beta_arcsec > 0))(
    'makes the images of a source at $beta_arcsec of $theta_E_arcsec arcsec',
    ({ beta_arcsec, theta_E_arcsec, theta_plus, theta_minus, mu_plus, mu_minus }) => {
      const images = sisImages(theta_E_arcsec, beta_arcsec)
      expect(images.length).toBe(theta_minus === undefined ? 1 : 2)
      expect(images[0].position).toBeCloseTo(theta_plus ?? Number.NaN, 9)
      expect(relativeError(images[0].magnification, mu_plus ?? Number.NaN)).toBeLessThan(1e-8)
      if (theta_minus === undefined) return
      expect(images[1].position).toBeCloseTo(theta_minus, 9)
      expect(relativeError(images[1].magnification, mu_minus ?? Number.NaN)).toBeLessThan(1e-6)
    },
  )

  it('deflects by its Einstein radius outwards, and not at all at its centre', () => {
    const { east, north } = sisDeflection(1.5, { east: 3, north: -4 })
    expect(east).toBeCloseTo(0.9, 12)
    expect(north).toBeCloseTo(-1.2, 12)
    expect(sisDeflection(1.5, { east: 0, north: 0 })).toEqual({ east: 0, north: 0 })
  })
})
