import { describe, expect, it } from 'vitest'
import { readReference, relativeError } from './_reference'
import { CONCORDANCE, PLANCK_2018, flatCosmology } from './cosmology'
import { einsteinMass, EinsteinMassError, type EinsteinMassRequest } from './einstein-mass'

interface Reference {
  sis_einstein_radius_and_mass: {
    rows: Record<
      | 'sigma_km_s'
      | 'z_l'
      | 'z_s'
      | 'D_l_mpc'
      | 'D_s_mpc'
      | 'D_ls_mpc'
      | 'theta_E_arcsec'
      | 'R_E_kpc'
      | 'M_E_msun'
      | 'Sigma_cr_kg_m2'
      | 'Sigma_cr_msun_pc2',
      number
    >[]
    mass_from_theta: Record<'theta_E_arcsec' | 'z_l' | 'z_s' | 'M_E_msun' | 'sigma_sis_km_s' | 'R_E_kpc', number>[]
  }
}
const { rows, mass_from_theta } = readReference<Reference>('lensing').sis_einstein_radius_and_mass

const exact = (radiusArcsec: number, lens: number, source: number): EinsteinMassRequest => ({
  radiusArcsec,
  radiusErrorArcsec: 0,
  lensRedshift: { value: lens, error: null },
  sourceRedshift: { value: source, error: null },
  cosmology: CONCORDANCE,
})

// fixtures/lensing/lensing.json: distances by astropy 5.2.1, ten digits given.
describe('what an Einstein radius weighs', () => {
  it.each(rows)('is the reference at dispersion $sigma_km_s, redshifts $z_l and $z_s', (row) => {
    const mass = einsteinMass(exact(row.theta_E_arcsec, row.z_l, row.z_s))
    expect(relativeError(mass.velocityDispersionKmS.value, row.sigma_km_s)).toBeLessThan(1e-8)
    expect(relativeError(mass.massSolar.value, row.M_E_msun)).toBeLessThan(1e-8)
    expect(relativeError(mass.radiusKpc.value, row.R_E_kpc)).toBeLessThan(1e-8)
    expect(relativeError(mass.criticalDensityKgM2.value, row.Sigma_cr_kg_m2)).toBeLessThan(1e-8)
    expect(relativeError(mass.criticalDensitySolarPerPc2.value, row.Sigma_cr_msun_pc2)).toBeLessThan(1e-8)
    expect(relativeError(mass.distancesMpc.lens, row.D_l_mpc)).toBeLessThan(1e-8)
    expect(relativeError(mass.distancesMpc.source, row.D_s_mpc)).toBeLessThan(1e-8)
    expect(relativeError(mass.distancesMpc.between, row.D_ls_mpc)).toBeLessThan(1e-8)
  })

  it.each(mass_from_theta)('is the reference at radius $theta_E_arcsec, redshifts $z_l and $z_s', (row) => {
    const mass = einsteinMass(exact(row.theta_E_arcsec, row.z_l, row.z_s))
    expect(relativeError(mass.massSolar.value, row.M_E_msun)).toBeLessThan(1e-8)
    expect(relativeError(mass.velocityDispersionKmS.value, row.sigma_sis_km_s)).toBeLessThan(1e-8)
    expect(relativeError(mass.radiusKpc.value, row.R_E_kpc)).toBeLessThan(1e-8)
  })

  it('has no interval when nothing is uncertain', () => {
    const { massSolar, leftOutShare, isAssumed, notes } = einsteinMass(exact(1, 0.3, 1))
    expect([massSolar.low, massSolar.high]).toEqual([massSolar.value, massSolar.value])
    expect([leftOutShare, isAssumed, notes]).toEqual([0, false, []])
  })

  it('follows the cosmology: mass and kpc go as 1 / H0, the dispersion does not know it', () => {
    const at = (cosmology: EinsteinMassRequest['cosmology']) => einsteinMass({ ...exact(1.2, 0.4, 1.5), cosmology })
    const [slow, fast] = [at(flatCosmology(50, 0.3)), at(flatCosmology(100, 0.3))]
    expect(slow.massSolar.value / fast.massSolar.value).toBeCloseTo(2, 10)
    expect(slow.velocityDispersionKmS.value).toBeCloseTo(fast.velocityDispersionKmS.value, 9)
    expect(at(PLANCK_2018).massSolar.value).not.toBeCloseTo(at(CONCORDANCE).massSolar.value, -8)
  })
})

describe('its uncertainty', () => {
  // First order: M goes as theta^2 and sigma as sqrt(theta), so 5 % of radius are 10 % of mass and 2.5 % of dispersion. Monotone
  // functions keep quantiles: the ends of the 68.27 % interval are exactly those of theta -1 and +1 sigma.
  it('of the radius alone is the formula at radius plus and minus 1 sigma', () => {
    const mass = einsteinMass({ ...exact(1.5, 0.4, 1.5), radiusErrorArcsec: 0.075 })
    const at = (radius: number) => einsteinMass(exact(radius, 0.4, 1.5))
    expect(relativeError(mass.massSolar.low, at(1.425).massSolar.value)).toBeLessThan(2e-3)
    expect(relativeError(mass.massSolar.high, at(1.575).massSolar.value)).toBeLessThan(2e-3)
    expect(relativeError(mass.velocityDispersionKmS.high, at(1.575).velocityDispersionKmS.value)).toBeLessThan(2e-3)
    expect(mass.criticalDensityKgM2.low).toBe(mass.criticalDensityKgM2.high)
  })

  it('begins at 0, holds its value and says so where the radius is not measured to better than itself', () => {
    const { velocityDispersionKmS, massSolar, radiusKpc, notes } = einsteinMass({
      ...exact(5, 0.4, 1.8),
      radiusErrorArcsec: 99,
    })
    for (const { value, low, high } of [velocityDispersionKmS, massSolar, radiusKpc]) {
      expect(low).toBe(0)
      expect(high).toBeGreaterThan(value)
    }
    // One sigma above: the dispersion goes as the root of the radius.
    expect(velocityDispersionKmS.high / velocityDispersionKmS.value).toBeCloseTo(Math.sqrt(104 / 5), 1)
    expect(notes[0]).toMatch(/error of the radius is larger than the radius/)
    expect(einsteinMass({ ...exact(5, 0.4, 1.8), radiusErrorArcsec: 1 }).notes).toEqual([])
  })

  it('of a redshift alone is the formula at that redshift plus and minus 1 sigma', () => {
    const request = { ...exact(1.5, 0.4, 1.5), sourceRedshift: { value: 1.5, error: 0.1 } }
    const mass = einsteinMass(request)
    // A source further away needs less mass.
    expect(relativeError(mass.massSolar.low, einsteinMass(exact(1.5, 0.4, 1.6)).massSolar.value)).toBeLessThan(2e-3)
    expect(relativeError(mass.massSolar.high, einsteinMass(exact(1.5, 0.4, 1.4)).massSolar.value)).toBeLessThan(2e-3)
  })

  it('of several inputs adds up as squares while they are small', () => {
    const request = exact(1.5, 0.4, 1.5)
    const width = (change: Partial<EinsteinMassRequest>) => {
      const { low, high, value } = einsteinMass({ ...request, ...change }).massSolar
      return (high - low) / 2 / value
    }
    const radius = { radiusErrorArcsec: 0.03 }
    const lens = { lensRedshift: { value: 0.4, error: 0.01 } }
    const source = { sourceRedshift: { value: 1.5, error: 0.05 } }
    const together = width({ ...radius, ...lens, ...source })
    expect(relativeError(together, Math.hypot(width(radius), width(lens), width(source)))).toBeLessThan(0.01)
  })

  it('of an assumed range holds the middle 68 % of it, and is marked', () => {
    const mass = einsteinMass({ ...exact(1.5, 0.4, 1), sourceRedshift: { low: 1, high: 3 } })
    // The share 0.1587 of a range from 1 to 3 is at 1.3173, 0.8413 at 2.6827.
    expect(relativeError(mass.massSolar.high, einsteinMass(exact(1.5, 0.4, 1.3173)).massSolar.value)).toBeLessThan(2e-3)
    expect(relativeError(mass.massSolar.low, einsteinMass(exact(1.5, 0.4, 2.6827)).massSolar.value)).toBeLessThan(2e-3)
    expect(mass.sourceRedshift).toBe(2)
    expect(mass.isAssumed).toBe(true)
    expect(mass.notes[0]).toContain('The redshift of the source is an assumed range')
  })

  // astropy 5.2.1 FlatLambdaCDM(70, 0.3), numpy quantiles of 400,000 normal draws of the radius, those below 0 set to 0.
  it.each([
    { radius: 5, error: 99, sigma: [504.24, 2299.8], mass: [4.9893e12, 2.159e15], kpc: [26.865, 558.83] },
    { radius: 2.2, error: 3.9, sigma: [334.47, 556.9], mass: [9.6593e11, 7.4233e12], kpc: [11.82, 32.769] },
  ])('of a radius $radius ± $error holds the value and begins at 0', ({ radius, error, sigma, mass, kpc }) => {
    const found = einsteinMass({ ...exact(radius, 0.4, 1.8), radiusErrorArcsec: error })
    for (const [{ value, low, high }, [expected, end]] of [
      [found.velocityDispersionKmS, sigma],
      [found.massSolar, mass],
      [found.radiusKpc, kpc],
    ] as const) {
      expect(low).toBe(0)
      expect(relativeError(value, expected)).toBeLessThan(1e-4)
      expect(relativeError(high, end)).toBeLessThan(0.01)
    }
    expect(found.notes.join(' ')).toContain('how much there is at most')
    expect(einsteinMass({ ...exact(radius, 0.4, 1.8), radiusErrorArcsec: radius / 2 }).notes).toEqual([])
  })

  // The same, 400,000 uniform draws of both redshifts with the source behind the lens; at 2 and 2.15 the mass would be 1.2281e13.
  it('of ranges whose middle is rare has the median in it, and says so', () => {
    const ranges = { lensRedshift: { low: 1, high: 3 }, sourceRedshift: { low: 1.1, high: 3.2 } }
    const { massSolar, notes } = einsteinMass({ ...exact(1.5, 2, 2.15), ...ranges })
    expect(relativeError(massSolar.low, 1.4556e12)).toBeLessThan(0.03)
    expect(relativeError(massSolar.value, 2.8917e12)).toBeLessThan(0.03)
    expect(relativeError(massSolar.high, 9.6057e12)).toBeLessThan(0.06)
    expect(notes.join(' ')).toContain('is the median')
  })

  it('of ranges as people assume them is that of 400,000 draws', () => {
    const ranges = { lensRedshift: { low: 0.2, high: 0.8 }, sourceRedshift: { low: 1, high: 3 } }
    const { velocityDispersionKmS: sigma, notes } = einsteinMass({ ...exact(2.16, 0.5, 2), ...ranges })
    expect(relativeError(sigma.value, 343.33)).toBeLessThan(1e-4)
    expect(relativeError(sigma.low, 312.11)).toBeLessThan(0.005)
    expect(relativeError(sigma.high, 393.84)).toBeLessThan(0.005)
    expect(notes.join(' ')).not.toContain('median')
  })

  it('leaves out redshifts with the source before the lens and says how many', () => {
    const mass = einsteinMass({
      ...exact(1.5, 0.4, 1),
      lensRedshift: { low: 0.2, high: 1 },
      sourceRedshift: { low: 0.6, high: 2 },
    })
    // Of the rectangle the triangle with sides 0.4 and 0.4 is left out: 0.08 of 1.12.
    expect(mass.leftOutShare).toBeCloseTo(0.08 / 1.12, 2)
    expect(mass.notes.join(' ')).toContain('Both redshifts are an assumed range')
    expect(mass.notes.join(' ')).toContain('they are left out')
    expect(mass.massSolar.low).toBeGreaterThan(0)
    expect(mass.massSolar.high).toBeLessThan(Infinity)
  })
})

describe('what is out of the usual', () => {
  it('is nothing for a galaxy as surveys find them', () => {
    expect(einsteinMass(exact(1.15, 0.3, 1)).unusual).toEqual([])
  })

  it('is pointed out and computed all the same for a cluster', () => {
    const { unusual, massSolar } = einsteinMass(exact(30, 0.4, 2))
    expect(unusual.map(({ which }) => which)).toEqual(['radiusArcsec', 'velocityDispersionKmS', 'massSolar'])
    expect(unusual[0].sentence).toContain('a group (3 to 10 arcsec) or a cluster (10 to 50)')
    expect(massSolar.value).toBeGreaterThan(1e13)
  })

  it('is pointed out for redshifts that are rarely found', () => {
    expect(einsteinMass(exact(1, 1.4, 4.5)).unusual.map(({ which }) => which)).toContain('lensRedshift')
    expect(einsteinMass(exact(1, 1.4, 4.5)).unusual.map(({ which }) => which)).toContain('sourceRedshift')
    expect(einsteinMass(exact(0.2, 0.03, 0.1)).unusual.map(({ which }) => which)).toEqual(
      expect.arrayContaining(['radiusArcsec', 'lensRedshift', 'sourceRedshift']),
    )
  })
})

describe('what cannot be', () => {
  const request = exact(1, 0.5, 2)
  it.each<[string, Partial<EinsteinMassRequest>]>([
    ['must lie behind the lens', { sourceRedshift: { value: 0.5, error: null } }],
    ['must lie behind the lens', { lensRedshift: { low: 2, high: 3 } }],
    ['The redshift of the lens must be a number above 0; 0 is not', { lensRedshift: { value: 0, error: null } }],
    [
      'The redshift of the source must be a number above 0; NaN is not',
      { sourceRedshift: { value: NaN, error: null } },
    ],
    ['The error of the redshift of the lens', { lensRedshift: { value: 0.5, error: -1 } }],
    ['The range of redshifts of the source must go from 0', { sourceRedshift: { low: 3, high: 1 } }],
    ['An Einstein radius is a number of arcsec above 0; 0 is not', { radiusArcsec: 0 }],
    ['The error of the radius', { radiusErrorArcsec: NaN }],
  ])('is refused: %s', (message, change) => {
    expect(() => einsteinMass({ ...request, ...change })).toThrow(message)
    expect(() => einsteinMass({ ...request, ...change })).toThrow(EinsteinMassError)
  })
})
