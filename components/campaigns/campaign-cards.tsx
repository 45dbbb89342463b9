import Link from 'next/link'
import { EmptyState } from '@/components/ui/notice'
import { ButtonLink } from '@/components/ui/button'
import type { CampaignCard } from '@/lib/work/campaigns/list-campaigns'
import { counted, percent } from './in-words'
import { asksInWords } from './next-steps'
import { ProgressBar } from '@/components/ui/progress-bar'

/** What matters most about this campaign to this person, in one line. */
function waiting(card: CampaignCard): string {
  if (card.candidates === 0) return card.role === 'lead' ? 'No candidates yet: upload files.' : 'No candidates yet.'
  if (card.role === 'lead' && card.split) return `${counted(card.split, 'split')} to settle`
  if (card.role === 'viewer') return `${counted(card.confirmed ?? 0, 'confirmed candidate')}`
  if (card.imaged === 0) return 'The files are being read.'
  if (card.asked) {
    return `${asksInWords(card.asked)}${card.left ? `, ${counted(card.left, 'candidate')} left` : ''}`
  }
  return card.left ? `${counted(card.left, 'candidate')} left for you` : 'Nothing is left for you to grade.'
}

function Looks({ card }: { card: CampaignCard }) {
  const { given, wanted, waiting } = card.looks
  if (wanted === null || waiting === null) return null
  return card.method === 'mean' ? (
    <ProgressBar done={given} total={wanted} label={`Looks given in ${card.name}`} />
  ) : (
    <ProgressBar
      done={card.imaged - waiting}
      total={card.imaged}
      label={`Candidates that want no more looks in ${card.name}`}
    />
  )
}

function looksInWords({ method, looks: { given, wanted, waiting } }: CampaignCard): string {
  if (wanted === null || waiting === null) return given ? `, ${counted(given, 'look')} given` : ''
  if (method === 'mean') return wanted ? `, ${percent(given, wanted)} of the looks given` : ''
  return waiting ? `, ${waiting.toLocaleString('en')} ${waiting === 1 ? 'wants' : 'want'} more looks` : ''
}

function Card({ card }: { card: CampaignCard }) {
  const { confirmed, split } = card
  return (
    <li className="relative flex flex-col gap-4 rounded-tray border border-line bg-raise p-5 focus-within:border-edge hover:border-edge">
      <div className="flex items-start justify-between gap-3">
        <div className="min-w-0">
          <h2 className="text-title font-semibold">
            <Link href={`/campaigns/${card.slug}`} className="after:absolute after:inset-0">
              {card.name}
            </Link>
          </h2>
          <p className="text-small text-mute">
            {card.survey} ({card.acronym})
          </p>
        </div>
        <span className="rounded-full border border-edge/60 px-2 text-note text-mute">{card.role}</span>
      </div>
      <p className="text-body font-semibold">{waiting(card)}</p>
      <div className="mt-auto flex flex-col gap-2">
        <Looks card={card} />
        <p className="text-note text-mute">
          {counted(card.candidates, 'candidate')}
          {looksInWords(card)}
          {confirmed !== null && confirmed > 0 ? `, ${confirmed.toLocaleString('en')} confirmed` : ''}
          {split !== null && split > 0 && card.role !== 'lead' ? `, ${counted(split, 'split')}` : ''}
        </p>
      </div>
    </li>
  )
}

export function CampaignCards({ cards }: { cards: CampaignCard[] }) {
  return (
    <ul className="grid gap-4 sm:grid-cols-[repeat(auto-fill,minmax(20rem,1fr))]">
      {cards.map((card) => (
        <Card key={card.slug} card={card} />
      ))}
    </ul>
  )
}

export function NoCampaigns({ mayCreate, email }: { mayCreate: boolean; email: string }) {
  return mayCreate ? (
    <EmptyState title="Start with a campaign">
      <p>
        A campaign is one search through one data set, with its own people, bands, rule and catalogue. Name it, then
        upload cutouts and invite the people who grade them.
      </p>
      <ButtonLink href="/campaigns/new" tone="lamp">
        Create a campaign
      </ButtonLink>
    </EmptyState>
  ) : (
    <EmptyState title="You are in no campaign yet">
      <p>
        A lead has to invite you. Send them the address of your account, <span className="text-text">{email}</span>, and
        open the link in the mail that comes.
      </p>
    </EmptyState>
  )
}
