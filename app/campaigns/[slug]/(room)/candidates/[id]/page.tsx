import { notFound } from 'next/navigation'
import { permitPage } from '@/app/_lib/page-permit'
import { EvidenceScreen } from '@/components/evidence/evidence-screen'
import { Problem } from '@/lib/platform/problems/problem'
import { askOfMe } from '@/lib/work/discussion/list-asks'
import { candidateEvidence } from '@/lib/work/rulings/candidate-evidence'
import { neighboursOf } from '@/lib/work/rulings/find-neighbours'
import { candidateName } from '@/lib/work/rulings/candidate-name'
import { isNotSentOn } from '@/lib/work/sheet/pass-of-candidate'
import { ruleOnCandidateAction, sendOnAction } from './actions'
import { measuringOf } from './measuring'
import { placeOf } from './place'
import { talkOf } from './talk'

export async function generateMetadata({ params }: PageProps<'/campaigns/[slug]/candidates/[id]'>) {
  const { slug, id: text } = await params
  if (!/^\d{1,15}$/.test(text)) return { title: 'Candidate' }
  const { db, permit } = await permitPage(slug, 'read', `/candidates/${text}`)
  const name = await candidateName(db, permit, Number(text))
  return { title: name === null ? 'Not here' : `${name} · ${permit.campaign.name}` }
}

/** Every member; what others made of a candidate is withheld from a grader who has not graded it. */
export default async function CandidatePage({ params }: PageProps<'/campaigns/[slug]/candidates/[id]'>) {
  const { slug, id: text } = await params
  if (!/^\d{1,15}$/.test(text)) notFound()
  const id = Number(text)
  const { db, permit } = await permitPage(slug, 'read', `/candidates/${id}`)
  const evidence = await candidateEvidence(db, permit, id).catch((error: unknown) => {
    if (error instanceof Problem && error.status === 404) notFound()
    throw error
  })
  const place = evidence.judgement ? await placeOf(db, permit, id) : null
  return (
    <EvidenceScreen
      key={id}
      slug={slug}
      personId={permit.viewer.id}
      evidence={evidence}
      neighbours={await neighboursOf(db, permit, id)}
      talk={await talkOf(db, permit, id, { calibration: evidence.judgement?.calibration ?? false })}
      asked={evidence.judgement ? null : await askOfMe(db, permit, id)}
      measuring={await measuringOf(db, permit, id)}
      sendOnAction={await sendOnOf(slug, id, permit.role)}
      place={place}
      ruleAction={permit.role === 'lead' && !place?.isMerged ? ruleOnCandidateAction.bind(null, slug, id) : null}
    />
  )
}

async function sendOnOf(slug: string, id: number, role: string) {
  if (role !== 'lead') return null
  const { db, permit } = await permitPage(slug, 'lead', `/candidates/${id}`)
  return (await isNotSentOn(db, permit, id)) ? sendOnAction.bind(null, slug, id) : null
}
