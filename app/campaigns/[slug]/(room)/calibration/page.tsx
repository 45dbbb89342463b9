import type { Metadata } from 'next'
import { permitPage } from '@/app/_lib/page-permit'
import { CalibrationScreen } from '@/components/calibration/calibration-screen'
import { calibrationPage, chooseGalaxies } from '@/lib/work/calibration/calibration-page'

export const metadata: Metadata = { title: 'Calibration' }

export default async function CalibrationRoute({ params }: PageProps<'/campaigns/[slug]/calibration'>) {
  const { slug } = await params
  const { db, permit } = await permitPage(slug, 'lead', '/calibration')
  // Where nothing is set aside yet, a lead begins with all.
  const setAside = await chooseGalaxies(db, permit, { which: 'set aside', name: null })
  const which = setAside.length > 0 ? 'set aside' : 'any'
  const galaxies = setAside.length > 0 ? setAside : await chooseGalaxies(db, permit, { which, name: null })
  return <CalibrationScreen slug={slug} page={await calibrationPage(db, permit)} first={{ which, galaxies }} />
}
