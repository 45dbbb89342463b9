import { cleanup, render } from '@testing-library/react'
import { expect, it } from 'vitest'
import { CONCORDANCE } from '@/lib/science/lensing/cosmology'
import { einsteinMass } from '@/lib/science/lensing/einstein-mass'
import { MassTable } from './mass-table'

const told = (radiusArcsec: number, radiusErrorArcsec: number) => {
  const redshifts = { lensRedshift: { value: 0.4, error: null }, sourceRedshift: { value: 1.8, error: null } }
  const mass = einsteinMass({ radiusArcsec, radiusErrorArcsec, ...redshifts, cosmology: CONCORDANCE })
  return render(<MassTable mass={mass} cosmology={CONCORDANCE} />).container.textContent
}

it('gives a range, and only its upper end where the radius is not measured to better than itself', () => {
  expect(told(1.5, 0.1)).toMatch(/km\/s\d+ to \d+/)
  cleanup()
  expect(told(2.2, 3.9)).toMatch(/334 km\/sbelow 55\d/)
})
