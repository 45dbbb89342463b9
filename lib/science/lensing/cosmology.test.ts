import { describe, expect, it } from 'vitest'
import { readReference, relativeError } from './_reference'
import {
  ageGyr,
  angularDiameterDistanceBetweenMpc,
  angularDiameterDistanceMpc,
  comovingDistanceMpc,
  CONCORDANCE,
  distanceModulusMag,
  expansionRate,
  flatCosmology,
  kpcPerArcsec,
  lookbackTimeGyr,
  luminosityDistanceMpc,
  omegaLambda,
  PLANCK_2018,
} from './cosmology'

interface Single {
  z: number
  comoving_mpc: number
  angular_diameter_mpc: number
  luminosity_mpc: number
  age_gyr: number
  lookback_gyr: number
  distmod_mag: number
  kpc_proper_per_arcsec: number
  H_km_s_mpc: number
}

interface Pair {
  z_l: number
  z_s: number
  D_l_mpc: number
  D_s_mpc: number
  D_ls_mpc: number
}

interface Reference {
  flat_lcdm: { single: Single[]; pairs: Pair[] }
  planck18: { single: Single[]; pairs: Pair[]; params: { Ode0: number } }
  published: {
    what: string
    params: { H0: number; Om0: number }
    z: number
    published: number[]
    rel_tol_for_agreement: number
    source: string
  }[]
  einstein_de_sitter_closed_form: {
    H0: number
    rows: { z: number; comoving_mpc: number; angular_diameter_mpc: number; luminosity_mpc: number }[]
  }
}

const reference = readReference<Reference>('cosmology')

// astropy 5.2.1: FlatLambdaCDM(70, 0.3) and Planck18. Ten digits are given, and the quadratures differ by 5e-10.
describe.each([
  ['flat LCDM 70/0.3', CONCORDANCE, reference.flat_lcdm],
  ['Planck 2018', PLANCK_2018, reference.planck18],
] as const)('%s', (_name, cosmology, { single, pairs }) => {
  it.each(single)('has the distances and ages of astropy at z = $z', (row) => {
    const { z } = row
    const pairsOfValues: [number, number][] = [
      [comovingDistanceMpc(cosmology, z), row.comoving_mpc],
      [angularDiameterDistanceMpc(cosmology, z), row.angular_diameter_mpc],
      [luminosityDistanceMpc(cosmology, z), row.luminosity_mpc],
      [ageGyr(cosmology, z), row.age_gyr],
      [distanceModulusMag(cosmology, z), row.distmod_mag],
      [kpcPerArcsec(cosmology, z), row.kpc_proper_per_arcsec],
      [cosmology.hubble * expansionRate(cosmology, z), row.H_km_s_mpc],
    ]
    for (const [value, expected] of pairsOfValues) expect(relativeError(value, expected)).toBeLessThan(2e-9)
    expect(Math.abs(lookbackTimeGyr(cosmology, z) - row.lookback_gyr)).toBeLessThan(5e-8)
  })

  it.each(pairs)(
    'has the distances of astropy between z = $z_l and $z_s',
    ({ z_l, z_s, D_l_mpc, D_s_mpc, D_ls_mpc }) => {
      expect(relativeError(angularDiameterDistanceMpc(cosmology, z_l), D_l_mpc)).toBeLessThan(2e-9)
      expect(relativeError(angularDiameterDistanceMpc(cosmology, z_s), D_s_mpc)).toBeLessThan(2e-9)
      expect(relativeError(angularDiameterDistanceBetweenMpc(cosmology, z_l, z_s), D_ls_mpc)).toBeLessThan(1e-8)
    },
  )
})

const BY_QUANTITY: Record<string, (cosmology: typeof CONCORDANCE, z: number) => number> = {
  'comoving_distance Mpc': comovingDistanceMpc,
  'angular_diameter_distance Mpc': angularDiameterDistanceMpc,
  'luminosity_distance Mpc': luminosityDistanceMpc,
  'lookback_time Gyr': lookbackTimeGyr,
}

// Wright 2006, PASP 118, 1711; Kempner; iCosmos; icosmo.org; Mathematica: as cited in each row of the fixture.
describe('published values of other calculators', () => {
  it.each(reference.published)(
    '$what at z = $z',
    ({ what, params, z, published, rel_tol_for_agreement: tolerance }) => {
      const value = BY_QUANTITY[what](flatCosmology(params.H0, params.Om0), z)
      for (const expected of published) expect(relativeError(value, expected)).toBeLessThan(tolerance)
    },
  )

  // Planck Collaboration VI 2020, A&A 641, A6, Table 2: 13.787 +- 0.020 Gyr.
  it('the age of the universe by Planck', () => {
    expect(Math.abs(ageGyr(PLANCK_2018, 0) - 13.787)).toBeLessThan(0.001)
    expect(omegaLambda(PLANCK_2018)).toBeCloseTo(reference.planck18.params.Ode0, 8)
  })
})

describe('an Einstein-de Sitter universe', () => {
  const { H0, rows } = reference.einstein_de_sitter_closed_form
  // Hogg, arXiv:astro-ph/9905116, equation 15 with Om = 1: D_C = 2 c/H0 (1 - (1 + z)^(-1/2)).
  it.each(rows)('follows its closed form at z = $z', (row) => {
    const cosmology = flatCosmology(H0, 1)
    expect(relativeError(comovingDistanceMpc(cosmology, row.z), row.comoving_mpc)).toBeLessThan(2e-9)
    expect(relativeError(angularDiameterDistanceMpc(cosmology, row.z), row.angular_diameter_mpc)).toBeLessThan(2e-9)
    expect(relativeError(luminosityDistanceMpc(cosmology, row.z), row.luminosity_mpc)).toBeLessThan(2e-9)
  })
})

describe('distances', () => {
  it('between two redshifts are not the difference of angular diameter distances', () => {
    const between = angularDiameterDistanceBetweenMpc(CONCORDANCE, 0.5, 1)
    const difference = angularDiameterDistanceMpc(CONCORDANCE, 1) - angularDiameterDistanceMpc(CONCORDANCE, 0.5)
    expect(between).toBeGreaterThan(1.5 * difference)
  })

  it('are 0 at redshift 0, negative backwards, and NaN for what is no redshift', () => {
    expect(comovingDistanceMpc(CONCORDANCE, 0)).toBe(0)
    expect(angularDiameterDistanceBetweenMpc(CONCORDANCE, 1, 0.5)).toBeLessThan(0)
    for (const z of [-0.1, Number.NaN, Number.POSITIVE_INFINITY]) {
      expect(comovingDistanceMpc(CONCORDANCE, z)).toBeNaN()
      expect(ageGyr(CONCORDANCE, z)).toBeNaN()
    }
  })
})
