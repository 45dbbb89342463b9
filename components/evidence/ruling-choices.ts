import type { RulingChoice } from '@/lib/work/rulings/ruling-input'

/** What a lead can choose, with its single key. Confirming takes the letters of the grades, setting aside that of 'not a lens'. */
export const CHOICES: { choice: RulingChoice; key: string; label: string; action: string }[] = [
  { choice: 'confirmed-A', key: 'A', label: 'Confirm as A', action: 'Confirm as A' },
  { choice: 'confirmed-B', key: 'B', label: 'as B', action: 'Confirm as B' },
  { choice: 'confirmed-C', key: 'C', label: 'as C', action: 'Confirm as C' },
  { choice: 'set-aside', key: 'N', label: 'Set aside', action: 'Set aside' },
  { choice: 'open', key: 'O', label: 'Reopen', action: 'Reopen' },
  { choice: 'by-verdict', key: 'V', label: 'By verdict', action: 'Let the verdict decide' },
]

/** What follows from a choice, told before it is made. */
export const CONSEQUENCE: Record<RulingChoice, string> = {
  'confirmed-A': 'It enters the catalogue as A and stays, whatever the grades say, until you rule again.',
  'confirmed-B': 'It enters the catalogue as B and stays, whatever the grades say, until you rule again.',
  'confirmed-C': 'It enters the catalogue as C and stays, whatever the grades say, until you rule again.',
  'set-aside': 'It is out, whatever the grades say, until you rule again.',
  open: 'It goes back to the bench, for one more look where it has all it wanted, and stays open until you rule again or let the verdict decide.',
  'by-verdict': 'Your ruling steps back: the newest verdict holds now, and later ones will.',
}

export const UNDECIDED = 'Choose what to rule and say why: everybody in the campaign can read the reason.'
