/**
 * Distances and ages in a flat universe of matter, a cosmological constant and, where given, photons and neutrinos.
 *   E(z)^2 = Om (1+z)^3 + Og (1+z)^4 (1 + n(z)) + OL,   OL = 1 - Om - Og (1 + n(0))
 *   D_C = c/H0 integral_0^z dz'/E     D_A(z1, z2) = (D_C(z2) - D_C(z1)) / (1 + z2)     D_L = (1 + z) D_C
 * Sources: D. W. Hogg, arXiv:astro-ph/9905116, equations 14 to 19 and 21; n(z), the neutrino density over the photons',
 * is the fit of E. Komatsu et al., ApJS 192, 18 (2011), section 3.3, with the power 1.83 that astropy uses, good to 0.1
 * %.
 */
import { SPEED_OF_LIGHT_KM_S } from './constants'
import { integrate } from './integrate'

export interface Cosmology {
  name: string
  /** Hubble constant, km/s/Mpc. */
  hubble: number
  /** Density of matter (baryons and dark matter) over the critical density today. */
  omegaMatter: number
  /** Temperature of the background radiation, K; 0 leaves photons and neutrinos out. */
  temperatureK: number
  /** Effective number of neutrino species, shared equally among the masses. */
  neutrinoSpecies: number
  neutrinoMassesEv: number[]
  reference: string
}

/** The round numbers that most papers use for comparison. */
export const CONCORDANCE: Cosmology = {
  name: 'flat LCDM 70/0.3',
  hubble: 70,
  omegaMatter: 0.3,
  temperatureK: 0,
  neutrinoSpecies: 0,
  neutrinoMassesEv: [],
  reference: 'common practice: H0 = 70 km/s/Mpc, Om = 0.3, no radiation',
}

export const PLANCK_2018: Cosmology = {
  name: 'Planck 2018',
  hubble: 67.66,
  omegaMatter: 0.30966,
  temperatureK: 2.7255,
  neutrinoSpecies: 3.046,
  neutrinoMassesEv: [0, 0, 0.06],
  reference: 'Planck Collaboration VI, A&A 641, A6 (2020), Table 2, TT,TE,EE+lowE+lensing+BAO',
}

/** Flat universe of matter and a cosmological constant without radiation. */
export function flatCosmology(hubble: number, omegaMatter: number): Cosmology {
  return {
    ...CONCORDANCE,
    name: `flat LCDM ${hubble}/${omegaMatter}`,
    hubble,
    omegaMatter,
    reference: 'given by the user',
  }
}

const MPC_KM = 3.085677581491367e19
const GYR_S = 3.15576e16
const ARCSEC_PER_RADIAN = 206264.80624709636

/** Og h^2 at 1 K: 8 pi G a / (3 c^2 (100 km/s/Mpc)^2), a the radiation density constant (CODATA 2018 G and sigma). */
const OMEGA_PHOTON_H2_PER_K4 = 4.481620089151489e-7

/** 7/8 (4/11)^(4/3): energy of one species of massless neutrinos over that of the photons. */
const NEUTRINO_TO_PHOTON = 0.22710731766023898
/** (4/11)^(1/3): temperature of the neutrinos over that of the photons. */
const NEUTRINO_TO_PHOTON_TEMPERATURE = 0.7137658555036082
const BOLTZMANN_EV_PER_K = 8.617333262e-5

function photonDensity({ temperatureK, hubble }: Cosmology): number {
  return (OMEGA_PHOTON_H2_PER_K4 * temperatureK ** 4) / (hubble / 100) ** 2
}

/** Density of neutrinos over that of photons at redshift z. */
function neutrinoRatio({ temperatureK, neutrinoSpecies, neutrinoMassesEv }: Cosmology, z: number): number {
  if (neutrinoMassesEv.length === 0 || temperatureK === 0) return NEUTRINO_TO_PHOTON * neutrinoSpecies
  const thermalEv = BOLTZMANN_EV_PER_K * NEUTRINO_TO_PHOTON_TEMPERATURE * temperatureK * (1 + z)
  let sum = 0
  for (const mass of neutrinoMassesEv) sum += (1 + (0.3173 * (mass / thermalEv)) ** 1.83) ** (1 / 1.83)
  return (NEUTRINO_TO_PHOTON * neutrinoSpecies * sum) / neutrinoMassesEv.length
}

/** Density of the cosmological constant over the critical density today, from flatness. */
export function omegaLambda(cosmology: Cosmology): number {
  return 1 - cosmology.omegaMatter - photonDensity(cosmology) * (1 + neutrinoRatio(cosmology, 0))
}

/** E(z) = H(z) / H0 for z > -1. */
export function expansionRate(cosmology: Cosmology, z: number): number {
  const photons = photonDensity(cosmology)
  const radiation = photons > 0 ? photons * (1 + neutrinoRatio(cosmology, z)) : 0
  const matter = cosmology.omegaMatter * (1 + z) ** 3
  return Math.sqrt(matter + radiation * (1 + z) ** 4 + omegaLambda(cosmology))
}

/** Line-of-sight comoving distance in Mpc; NaN for a redshift below 0 or not finite. */
export function comovingDistanceMpc(cosmology: Cosmology, z: number): number {
  return comovingBetween(cosmology, 0, z)
}

/** Comoving distance from redshift `from` to `to`, in the variable ln(1 + z), in which the integrand is smooth. */
function comovingBetween(cosmology: Cosmology, from: number, to: number): number {
  if (!(from >= 0 && to >= 0 && Number.isFinite(from) && Number.isFinite(to))) return Number.NaN
  const integrand = (u: number) => Math.exp(u) / expansionRate(cosmology, Math.expm1(u))
  return (SPEED_OF_LIGHT_KM_S / cosmology.hubble) * integrate(integrand, Math.log1p(from), Math.log1p(to))
}

/** Angular diameter distance in Mpc; it has a maximum near z = 1.6. */
export function angularDiameterDistanceMpc(cosmology: Cosmology, z: number): number {
  return comovingDistanceMpc(cosmology, z) / (1 + z)
}

/**
 * Angular diameter distance in Mpc from redshift `zFront` to `zBehind`. It is not the difference of two angular
 * diameter distances. Negative when `zBehind` lies in front.
 */
export function angularDiameterDistanceBetweenMpc(cosmology: Cosmology, zFront: number, zBehind: number): number {
  return comovingBetween(cosmology, zFront, zBehind) / (1 + zBehind)
}

export function luminosityDistanceMpc(cosmology: Cosmology, z: number): number {
  return comovingDistanceMpc(cosmology, z) * (1 + z)
}

/** Distance modulus m - M in magnitudes, 5 log10(D_L / 10 pc). */
export function distanceModulusMag(cosmology: Cosmology, z: number): number {
  return 5 * Math.log10(luminosityDistanceMpc(cosmology, z)) + 25
}

/** Proper length in kpc that one arcsecond spans at redshift z. */
export function kpcPerArcsec(cosmology: Cosmology, z: number): number {
  return (angularDiameterDistanceMpc(cosmology, z) * 1000) / ARCSEC_PER_RADIAN
}

/** Age of the universe at redshift z in 10^9 Julian years (Hogg equation 30 from z to infinity). */
export function ageGyr(cosmology: Cosmology, z: number): number {
  if (!(z >= 0 && Number.isFinite(z))) return Number.NaN
  const start = Math.log1p(z)
  // E grows at least as (1 + z)^1.5: past 30 e-folds less than 1e-19 is left.
  const integral = integrate((u) => 1 / expansionRate(cosmology, Math.expm1(u)), start, start + 30)
  return (integral * MPC_KM) / cosmology.hubble / GYR_S
}

export function lookbackTimeGyr(cosmology: Cosmology, z: number): number {
  return ageGyr(cosmology, 0) - ageGyr(cosmology, z)
}
