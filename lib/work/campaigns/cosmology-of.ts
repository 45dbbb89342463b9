import type { Campaign } from '@/db/schema/campaigns'
import { flatCosmology, PLANCK_2018, type Cosmology } from '@/lib/science/lensing/cosmology'

/** The cosmology in which a campaign turns angles into masses and delays. */
export function cosmologyOf(campaign: Pick<Campaign, 'cosmology' | 'hubble_constant' | 'omega_matter'>): Cosmology {
  return campaign.cosmology === 'Planck 2018'
    ? PLANCK_2018
    : flatCosmology(campaign.hubble_constant, campaign.omega_matter)
}

/** `flat ΛCDM, H₀ = 70 km/s/Mpc, Ωm = 0.3`. */
export function cosmologyInWords({ name, hubble, omegaMatter }: Pick<Cosmology, 'name' | 'hubble' | 'omegaMatter'>) {
  const model = name === PLANCK_2018.name ? `${PLANCK_2018.name} (flat ΛCDM)` : 'flat ΛCDM'
  return `${model}, H₀ = ${hubble} km/s/Mpc, Ωm = ${omegaMatter}`
}
